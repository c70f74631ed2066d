import type { LayoutPicture, PlainLayoutAnswer } from './layout-view.ts';
import { threadFile } from './thread-file.ts';
import { type ThreadLimits, type WorkOptions, WorkThread } from './work-thread.ts';

/** One layout to be solved; everything as text, so that nothing but data enters the thread. */
export interface SolveJob {
  /** The case file. */
  readonly text: string;
  /** Name of the case file, for messages. */
  readonly file?: string;
  /** Contents of the files that the case names, by that name. */
  readonly files: Readonly<Record<string, string>>;
  readonly layout: string;
  /** Names of the starts wanted; all without it. */
  readonly starts?: readonly string[];
  /** Date and command as they shall stand in the record. */
  readonly at: string;
  readonly command: string;
  /** 'picture': what a page draws, with the field as bytes; 'answer': mesh and fields for files and records. */
  readonly wanted: 'answer' | 'picture';
}

export type SolveResult =
  | { readonly kind: 'answer'; readonly answer: PlainLayoutAnswer }
  | {
      readonly kind: 'picture';
      readonly view: LayoutPicture;
      readonly field: ArrayBuffer /** SHA-256. */;
      readonly fieldHash: string;
    };

/** A thread that solves; see {@link WorkThread}. */
export type SolvingThread = WorkThread<SolveJob, SolveResult>;

/** A warm thread for many solves, one at a time; close it in the end. */
export function solvingThread(limits: ThreadLimits = {}): SolvingThread {
  return new WorkThread(threadFile('run/solve-thread.js'), limits);
}

/**
 * Solves one layout in a thread of its own, which ends with it.
 *
 * @throws {WorkError} by the promise, see {@link WorkThread.run}
 */
export async function runInThread(
  job: Omit<SolveJob, 'wanted'>,
  options: WorkOptions & ThreadLimits = {},
): Promise<PlainLayoutAnswer> {
  const thread = solvingThread(options);
  try {
    const result = await thread.run({ ...job, wanted: 'answer' }, options);
    if (result.kind !== 'answer') throw new Error('The thread gave a picture for an answer.');
    return result.answer;
  } finally {
    await thread.close();
  }
}
