import { examiningThread } from '../run/examine-in-thread.ts';
import { drawingReport, reportLines } from './drawing-report.ts';
import { progressBar, stopOnInterrupt } from './progress.ts';
import { readInput } from './read-input.ts';
import { status } from './status.ts';

/** Sizes of the mesh that a check looks at, ÷ those of the mesh that is solved on: enough to find every part. */
const checkScale = 4;

/** `tarry check`: the drawing in figures, and each layout looked through without solving; returns the exit status. */
export async function check(path: string, options: { readonly json?: true }): Promise<number> {
  const input = readInput(path);
  const { theCase, text, file, files } = input;
  const layouts = theCase.layouts.filter((one) => !one.notAvailable);
  const progress = progressBar();
  const interrupt = stopOnInterrupt();
  const thread = examiningThread();
  try {
    for (const [index, layout] of layouts.entries()) {
      await thread.run(
        { text, file, files, layout: layout.name, scale: checkScale },
        {
          signal: interrupt.signal,
          progress: (doing, done) => progress.show(doing, (index + done) / layouts.length),
        },
      );
    }
  } finally {
    progress.end();
    interrupt.release();
    await thread.close();
  }
  const facts = drawingReport(theCase);
  if (options.json) console.log(JSON.stringify(facts, undefined, 2));
  else {
    for (const line of reportLines(theCase, facts)) console.log(line);
    const names = layouts.map((one) => one.name).join(', ');
    console.log(`In order: ${layouts.length} of ${theCase.layouts.length} layouts can be solved (${names}).`);
  }
  return status.answered;
}
