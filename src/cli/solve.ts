import { findLayout } from '../run/answer-layout.ts';
import type { Answers } from '../run/answers.ts';
import { withDifferences } from '../run/differences.ts';
import { solvingThread } from '../run/run-in-thread.ts';
import { findStart } from '../run/start-weights.ts';
import { answerLines } from './answer-lines.ts';
import { progressBar, stopOnInterrupt } from './progress.ts';
import { type CaseInput, readInput } from './read-input.ts';
import { status } from './status.ts';

export interface SolveOptions {
  readonly layout?: string;
  readonly start?: string;
  readonly json?: true;
  /** The command line as it shall stand in the record. */
  readonly command: string;
}

/** `tarry solve`: answers for one layout or each, as tables or JSON; returns the exit status. */
export async function solve(path: string, options: SolveOptions): Promise<number> {
  const input = readInput(path);
  const { theCase } = input;
  const chosen = options.layout === undefined ? theCase.layouts : [findLayout(theCase, options.layout)];
  const start = options.start === undefined ? undefined : findStart(theCase, options.start).name;
  const wanted = new Set(chosen.filter((one) => !one.notAvailable).map((one) => one.name));
  // The reference is solved too: each answer says how far it is from it.
  const names = theCase.layouts
    .filter((one) => wanted.has(one.name) || (one.name === theCase.reference && !one.notAvailable))
    .map((one) => one.name);
  const solved = await solveLayouts(input, names, start, options.command);
  const answers = withDifferences(theCase.reference, solved).filter((one) => wanted.has(one.layout));
  if (options.json) {
    const one = chosen.length === 1 && answers.length === 1;
    console.log(JSON.stringify(one ? answers[0] : answers, undefined, 2));
  } else for (const line of answerLines(theCase, chosen, answers, start)) console.log(line);
  return status.answered;
}

async function solveLayouts(
  input: CaseInput,
  names: readonly string[],
  start: string | undefined,
  command: string,
): Promise<Answers[]> {
  const progress = progressBar();
  const interrupt = stopOnInterrupt();
  const thread = solvingThread();
  const answers: Answers[] = [];
  try {
    for (const [index, layout] of names.entries()) {
      const result = await thread.run(
        {
          text: input.text,
          file: input.file,
          files: input.files,
          layout,
          ...(start !== undefined && { starts: [start] }),
          at: new Date().toISOString(),
          command,
          wanted: 'answer',
        },
        {
          signal: interrupt.signal,
          progress: (doing, done) => progress.show(`${layout}: ${doing}`, (index + done) / names.length),
        },
      );
      if (result.kind === 'answer') answers.push(...result.answer.answers);
    }
  } finally {
    progress.end();
    interrupt.release();
    await thread.close();
  }
  return answers;
}
