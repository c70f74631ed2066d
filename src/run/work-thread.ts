import { Worker } from 'node:worker_threads';
import { type Failure, fault, WorkError } from './failure.ts';
import { ASKED_TO_STOP, OUT_OF_TIME, type ThreadJob, type ThreadMessage } from './serve-thread.ts';

/** How one piece of work is watched and limited from outside. */
export interface WorkOptions {
  readonly progress?: (stage: string, done: number) => void;
  /** Aborting it asks the work to end; it then fails with kind 'stopped'. */
  readonly signal?: AbortSignal;
  /** Most seconds of work; it then fails with kind 'limit'. Default: no limit. */
  readonly seconds?: number;
}

/** What a thread may use. */
export interface ThreadLimits {
  /** Stack in MB: the triangulation package recurses as deep as the drawing has corners (ENGINE). Default 64. */
  readonly stackMb?: number;
  /** Heap of JavaScript objects in MB; typed arrays are not counted in it. Default 4096. */
  readonly heapMb?: number;
  /** Seconds between asking the work to end and ending its thread. Default 2. */
  readonly grace?: number;
}

interface Running<Result> {
  readonly number: number;
  readonly flag: Int32Array;
  readonly progress: ((stage: string, done: number) => void) | undefined;
  readonly resolve: (result: Result) => void;
  readonly reject: (error: WorkError) => void;
}

/**
 * One thread that does one piece of work at a time and stays warm between them. A thread that dies (memory, an order
 * to end that it did not follow) fails the work in hand and is started afresh for the next.
 */
export class WorkThread<Input, Result> {
  readonly #file: URL;
  readonly #limits: Required<ThreadLimits>;
  #worker: Worker | undefined;
  #running: Running<Result> | undefined;
  #count = 0;
  #closed = false;

  /** @param file compiled start file of the thread, one that calls `serveThread` */
  constructor(file: URL, limits: ThreadLimits = {}) {
    this.#file = file;
    this.#limits = { stackMb: 64, heapMb: 4096, grace: 2, ...limits };
  }

  get busy(): boolean {
    return this.#running !== undefined;
  }

  /**
   * Does one piece of work in the thread.
   *
   * @throws {WorkError} with the failure, by the promise; kind 'stopped' or 'limit' when ended from outside
   * @throws {Error} when the thread is closed or busy: a mistake of the caller
   */
  async run(input: Input, options: WorkOptions = {}): Promise<Result> {
    if (this.#closed) throw new WorkError(stopped());
    if (this.#running !== undefined) throw new Error('A thread does one piece of work at a time.');
    if (options.signal?.aborted === true) throw new WorkError(stopped());
    const flag = new Int32Array(new SharedArrayBuffer(4));
    const worker = this.#worker ?? this.#start();
    const number = ++this.#count;
    const timers: NodeJS.Timeout[] = [];
    const end = (reason: number, failure: Failure) => {
      if (Atomics.compareExchange(flag, 0, 0, reason) !== 0) return;
      timers.push(setTimeout(() => this.#drop(failure), this.#limits.grace * 1000));
    };
    const onAbort = () => end(ASKED_TO_STOP, stopped());
    if (options.seconds !== undefined) {
      const seconds = options.seconds;
      timers.push(setTimeout(() => end(OUT_OF_TIME, outOfTime(seconds)), seconds * 1000));
    }
    options.signal?.addEventListener('abort', onAbort, { once: true });
    try {
      return await new Promise<Result>((resolve, reject) => {
        this.#running = { number, flag, progress: options.progress, resolve, reject };
        const job: ThreadJob<Input> = { number, input, flag: flag.buffer as SharedArrayBuffer };
        worker.postMessage(job);
      });
    } catch (error) {
      // Work that was told to end fails in its own words; the flag says why it ended.
      const reason = Atomics.load(flag, 0);
      if (reason === OUT_OF_TIME) throw new WorkError(outOfTime(options.seconds ?? 0), error);
      if (reason === ASKED_TO_STOP) throw new WorkError(stopped(), error);
      throw error;
    } finally {
      for (const timer of timers) clearTimeout(timer);
      options.signal?.removeEventListener('abort', onAbort);
      this.#running = undefined;
    }
  }

  /** Starts the thread before there is work, so that the first need not wait for it to load. */
  warm(): void {
    if (!this.#closed && this.#worker === undefined) this.#start();
  }

  /** Ends the thread; work in hand fails with kind 'stopped'. */
  async close(): Promise<void> {
    this.#closed = true;
    const worker = this.#worker;
    this.#drop(stopped());
    await worker?.terminate();
  }

  #start(): Worker {
    const { stackMb, heapMb } = this.#limits;
    const worker = new Worker(this.#file, {
      resourceLimits: { stackSizeMb: stackMb, maxOldGenerationSizeMb: heapMb },
      execArgv: [],
    });
    this.#worker = worker;
    worker.on('message', (message: ThreadMessage<Result>) => this.#hear(message));
    worker.on('error', (error: Error & { code?: string }) => {
      if (this.#worker !== worker) return;
      const full = error.code === 'ERR_WORKER_OUT_OF_MEMORY';
      this.#drop(full ? outOfMemory(heapMb) : fault(String(error.stack)));
    });
    worker.on('exit', (status) => {
      if (this.#worker === worker) this.#drop(fault(`thread ended with status ${status}`));
    });
    return worker;
  }

  #hear(message: ThreadMessage<Result>): void {
    const running = this.#running;
    if (running === undefined || running.number !== message.number) return;
    if (message.kind === 'progress') running.progress?.(message.stage, message.done);
    else if (message.kind === 'result') running.resolve(message.result);
    else running.reject(new WorkError(message.failure));
  }

  /** Gives the thread up; the next work gets a new one. */
  #drop(failure: Failure): void {
    const worker = this.#worker;
    this.#worker = undefined;
    this.#running?.reject(new WorkError(failure));
    if (worker !== undefined) void worker.terminate();
  }
}

function stopped(): Failure {
  return {
    kind: 'stopped',
    code: 'STOPPED',
    what: 'The work was stopped before it was done',
    where: {},
    remedy: 'Start it again when the answer is wanted',
  };
}

function outOfTime(seconds: number): Failure {
  return {
    kind: 'limit',
    code: 'TIME_LIMIT',
    what: `The work was not done within ${seconds} s`,
    where: {},
    remedy: 'Ask for less accuracy, or leave out detail of the drawing that does not matter',
  };
}

function outOfMemory(heapMb: number): Failure {
  return {
    kind: 'limit',
    code: 'MEMORY_LIMIT',
    what: `The work needs more than the ${heapMb} MB of memory set aside for it`,
    where: {},
    remedy: 'Ask for fewer nodes, or leave out detail of the drawing that does not matter',
  };
}
