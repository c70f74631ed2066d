import { randomUUID } from 'node:crypto';
import { EventEmitter } from 'node:events';
import { CaseError } from '../case/errors.ts';
import { type Failure, toFailure } from '../run/failure.ts';
import type { JobView } from './contract.ts';
import { failureView } from './error-view.ts';

/** Does one solve; fails with a WorkError. `slot` is the number of the thread, 0 … threads − 1. */
export type Solve = (slot: number, caseId: string, layout: string, watch: Watch) => Promise<void>;

/** How a solve is told to end and tells how far it is. */
export interface Watch {
  readonly signal: AbortSignal;
  readonly progress: (doing: string, done: number) => void;
}

/** A job and the number of its last change: the id of its events. */
export interface JobState {
  readonly view: JobView;
  readonly version: number;
}

interface Job {
  view: JobView;
  version: number;
  readonly cancel: AbortController;
}

/** Most jobs that wait, and most ended ones that are remembered. */
const MOST_WAITING = 100;
const MOST_ENDED = 500;

/**
 * Solves asked for: at most one running per thread, the newest asked first (it is the one on screen), cancelled at
 * once. A layout that waits or runs already is not asked twice.
 */
export class JobBoard {
  readonly #jobs = new Map<string, Job>();
  /** Ids, the next to run last. */
  readonly #waiting: string[] = [];
  /** Numbers of the threads without work, the one to use next last: it is the warmest. */
  readonly #freeSlots: number[];
  readonly #solve: Solve;
  readonly #isAnswered: (caseId: string, layout: string) => boolean;
  readonly #onFault: (trace: string) => void;
  readonly #changes = new EventEmitter();
  #closed = false;

  constructor(options: {
    threads: number;
    solve: Solve;
    /** True when the answer is there already: the job is then done when asked. */
    isAnswered: (caseId: string, layout: string) => boolean;
    onFault: (trace: string) => void;
  }) {
    this.#freeSlots = Array.from({ length: options.threads }, (_, i) => options.threads - 1 - i);
    this.#solve = options.solve;
    this.#isAnswered = options.isAnswered;
    this.#onFault = options.onFault;
    this.#changes.setMaxListeners(0);
  }

  get counts(): { waiting: number; running: number } {
    const running = [...this.#jobs.values()].filter(({ view }) => view.state === 'running').length;
    return { waiting: this.#waiting.length, running };
  }

  /** @throws {CaseError} TOO_MUCH_WAITING */
  ask(caseId: string, layout: string): JobView {
    if (this.#closed) throw waitingTooMuch();
    const id = randomUUID();
    if (this.#isAnswered(caseId, layout)) {
      return this.#add({ id, caseId, layout, state: 'done', doing: 'solved before', done: 1 });
    }
    const same = [...this.#jobs.values()].find(
      ({ view }) => view.caseId === caseId && view.layout === layout && !isEnded(view),
    );
    if (same !== undefined) {
      this.#toTheFront(same.view.id);
      return same.view;
    }
    if (this.#waiting.length >= MOST_WAITING) throw waitingTooMuch();
    this.#add({ id, caseId, layout, state: 'waiting', doing: 'waiting for a thread', done: 0 });
    this.#waiting.push(id);
    this.#startNext();
    return this.state(id).view;
  }

  /** @throws {CaseError} UNKNOWN_JOB */
  state(id: string): JobState {
    const { view, version } = this.#job(id);
    return { view, version };
  }

  /**
   * Ends a job now; one that has ended stays as it is.
   * @throws {CaseError} UNKNOWN_JOB
   */
  cancel(id: string): JobView {
    const job = this.#job(id);
    if (!isEnded(job.view)) {
      const place = this.#waiting.indexOf(id);
      if (place >= 0) this.#waiting.splice(place, 1);
      this.#change(job, { state: 'stopped', doing: 'stopped' });
      job.cancel.abort();
    }
    return job.view;
  }

  /** Calls `listener` after each change of a job until the function given back is called. */
  watch(id: string, listener: (state: JobState) => void): () => void {
    this.#changes.on(id, listener);
    return () => this.#changes.off(id, listener);
  }

  /** Stops every job and takes no more. */
  close(): void {
    this.#closed = true;
    for (const id of [...this.#jobs.keys()]) this.cancel(id);
  }

  #job(id: string): Job {
    const job = this.#jobs.get(id);
    if (job !== undefined) return job;
    throw new CaseError('UNKNOWN_JOB', 'There is no job of this number', {}, 'Ask for the layout again');
  }

  #add(view: JobView): JobView {
    this.#jobs.set(view.id, { view, version: 1, cancel: new AbortController() });
    let tooMany = this.#jobs.size - MOST_ENDED - MOST_WAITING;
    for (const [id, job] of this.#jobs) {
      if (tooMany-- <= 0) break;
      if (isEnded(job.view)) this.#jobs.delete(id);
    }
    return view;
  }

  #toTheFront(id: string): void {
    const place = this.#waiting.indexOf(id);
    if (place >= 0) this.#waiting.push(...this.#waiting.splice(place, 1));
  }

  #startNext(): void {
    while (this.#waiting.length > 0) {
      const slot = this.#freeSlots.pop();
      if (slot === undefined) return;
      const job = this.#jobs.get(this.#waiting.pop() ?? '');
      if (job === undefined) this.#freeSlots.push(slot);
      else void this.#work(slot, job);
    }
  }

  async #work(slot: number, job: Job): Promise<void> {
    const { caseId, layout } = job.view;
    this.#change(job, { state: 'running', doing: 'starting' });
    const progress = (doing: string, done: number) => {
      // What is done never goes back, whatever the stages say.
      if (!isEnded(job.view)) this.#change(job, { doing, done: Math.max(job.view.done, Math.min(done, 1)) });
    };
    try {
      await this.#solve(slot, caseId, layout, { signal: job.cancel.signal, progress });
      if (!isEnded(job.view)) this.#change(job, { state: 'done', doing: 'done', done: 1 });
    } catch (error) {
      this.#fail(job, toFailure(error));
    } finally {
      this.#freeSlots.push(slot);
      this.#startNext();
    }
  }

  #fail(job: Job, failure: Failure): void {
    if (failure.kind === 'fault') this.#onFault(failure.trace ?? failure.what);
    if (isEnded(job.view)) return;
    if (failure.kind === 'stopped') this.#change(job, { state: 'stopped', doing: 'stopped' });
    else this.#change(job, { state: 'failed', doing: failure.what, error: failureView(failure) });
  }

  #change(job: Job, changed: Partial<JobView>): void {
    job.view = { ...job.view, ...changed };
    job.version++;
    this.#changes.emit(job.view.id, { view: job.view, version: job.version });
  }
}

/** True when nothing more happens to the job. */
export function isEnded({ state }: JobView): boolean {
  return state !== 'waiting' && state !== 'running';
}

function waitingTooMuch(): CaseError {
  return new CaseError(
    'TOO_MUCH_WAITING',
    'More work is waiting than the service takes on',
    {},
    'Wait until some of it is done, or stop what is no longer wanted',
  );
}
