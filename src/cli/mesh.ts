import { writeFileSync } from 'node:fs';
import { vtuText } from '../record/vtu.ts';
import { findLayout } from '../run/answer-layout.ts';
import { examiningThread } from '../run/examine-in-thread.ts';
import { drawingReport, reportLines } from './drawing-report.ts';
import { progressBar, stopOnInterrupt } from './progress.ts';
import { readInput } from './read-input.ts';
import { status } from './status.ts';

export interface MeshCommandOptions {
  readonly layout?: string;
  readonly out?: string;
  readonly json?: true;
}

/** `tarry mesh`: the triangulation of one layout and its quality figures; returns the exit status. */
export async function mesh(path: string, options: MeshCommandOptions): Promise<number> {
  const { theCase, text, file, files } = readInput(path);
  const layout = findLayout(theCase, options.layout ?? theCase.reference);
  const progress = progressBar();
  const interrupt = stopOnInterrupt();
  const thread = examiningThread();
  try {
    const { mesh: made, quality } = await thread.run(
      { text, file, files, layout: layout.name, scale: 1 },
      { signal: interrupt.signal, progress: progress.show },
    );
    progress.end();
    const facts = {
      ...drawingReport(theCase),
      mesh: {
        nodes: made.nodes.length / 2,
        triangles: made.triangles.length / 3,
        minAngle: quality.minAngle,
        minAngleElsewhere: quality.minAngleElsewhere,
        chordError: made.chordError,
      },
    };
    if (options.out !== undefined) writeFileSync(options.out, vtuText(made));
    if (options.json) console.log(JSON.stringify(facts, undefined, 2));
    else for (const line of reportLines(theCase, facts)) console.log(line);
  } finally {
    progress.end();
    interrupt.release();
    await thread.close();
  }
  return status.answered;
}
