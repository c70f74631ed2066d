import type { ExaminedLayout } from './examine.ts';
import { threadFile } from './thread-file.ts';
import { WorkThread } from './work-thread.ts';

/** One layout to be examined; everything as text, so that nothing but data enters the thread. */
export interface ExamineJob {
  readonly text: string;
  readonly file: string;
  readonly files: Readonly<Record<string, string>>;
  readonly layout: string;
  readonly scale: number;
}

export type ExamineResult = ExaminedLayout;

/** A warm thread for many layouts, one at a time; close it in the end. */
export function examiningThread(): WorkThread<ExamineJob, ExamineResult> {
  return new WorkThread(threadFile('run/examine-thread.js'));
}
