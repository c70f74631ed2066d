import { parentPort } from 'node:worker_threads';
import { type Failure, toFailure } from './failure.ts';

/** Value of the flag that asks the work to end: by whom. */
export const ASKED_TO_STOP = 1;
export const OUT_OF_TIME = 2;

/** What a thread is told to do; one at a time. */
export interface ThreadJob<Input> {
  readonly number: number;
  readonly input: Input;
  /** One Int32 that turns from 0 to {@link ASKED_TO_STOP} or {@link OUT_OF_TIME}. */
  readonly flag: SharedArrayBuffer;
}

/** What a thread says back. */
export type ThreadMessage<Result> =
  | { readonly number: number; readonly kind: 'progress'; readonly stage: string; readonly done: number }
  | { readonly number: number; readonly kind: 'result'; readonly result: Result }
  | { readonly number: number; readonly kind: 'failure'; readonly failure: Failure };

/** How the work inside a thread is watched: see mesher/hooks.ts; `progress` also names the stage. */
export interface ThreadHooks {
  readonly stop: () => boolean;
  readonly progress: (stage: string, done: number) => void;
}

/** A result and the buffers in it that are handed over instead of copied. */
export interface Handed<Result> {
  readonly result: Result;
  readonly buffers: readonly ArrayBuffer[];
}

/** Least time between two progress messages of one stage, in milliseconds. */
const PROGRESS_MS = 50;

/** Makes the running thread answer jobs with `work`, one after the other. Call once, in a thread's own file. */
export function serveThread<Input, Result>(work: (input: Input, hooks: ThreadHooks) => Handed<Result>): void {
  const port = parentPort;
  if (port === null) throw new Error('This file is the start of a thread and is not imported elsewhere.');
  port.on('message', (job: ThreadJob<Input>) => {
    const { number } = job;
    const flag = new Int32Array(job.flag);
    const say = (message: ThreadMessage<Result>, buffers: readonly ArrayBuffer[] = []) =>
      port.postMessage(message, [...buffers]);
    let toldStage = '';
    let toldAt = 0;
    const progress = (stage: string, done: number) => {
      const now = performance.now();
      if (stage === toldStage && now - toldAt < PROGRESS_MS) return;
      toldStage = stage;
      toldAt = now;
      say({ number, kind: 'progress', stage, done });
    };
    try {
      const { result, buffers } = work(job.input, { stop: () => Atomics.load(flag, 0) !== 0, progress });
      say({ number, kind: 'result', result }, buffers);
    } catch (error) {
      say({ number, kind: 'failure', failure: toFailure(error) });
    }
  });
}
