import type { FastifyReply, FastifyRequest } from 'fastify';
import { CaseError } from '../case/errors.ts';
import { isEnded, type JobBoard, type JobState } from './job-board.ts';

/** Milliseconds between the comments that keep a silent stream open. */
const HEARTBEAT_MS = 15_000;

/** Most streams open at once: each holds a connection. */
const MOST_STREAMS = 200;

/** The streams that are open; the server ends them before it closes. */
export class OpenStreams {
  readonly #ends = new Set<() => void>();

  /** @throws {CaseError} TOO_MUCH_WAITING */
  checkRoom(): void {
    if (this.#ends.size < MOST_STREAMS) return;
    throw new CaseError(
      'TOO_MUCH_WAITING',
      'More pages follow the work than the service takes on',
      {},
      'Close pages that are no longer needed, or ask for the state of the job instead',
    );
  }

  add(end: () => void): () => void {
    this.#ends.add(end);
    return () => this.#ends.delete(end);
  }

  endAll(): void {
    for (const end of [...this.#ends]) end();
  }
}

/**
 * Streams a job as server-sent events: one event 'job' per change, the whole JobView each, so that a client that was
 * away misses nothing but steps in between. Ends after the last change; a client that has seen that one gets 204,
 * which tells it not to come back.
 *
 * Source of the format: WHATWG HTML, server-sent events.
 */
export function streamJob(
  request: FastifyRequest,
  reply: FastifyReply,
  jobs: JobBoard,
  id: string,
  streams: OpenStreams,
): void {
  const now = jobs.state(id);
  const seen = request.headers['last-event-id'];
  if (isEnded(now.view) && seen === String(now.version)) {
    void reply.code(204).send();
    return;
  }
  streams.checkRoom();
  reply.hijack();
  const out = reply.raw;
  out.writeHead(200, {
    'content-type': 'text/event-stream; charset=utf-8',
    'cache-control': 'no-cache, no-store',
    'x-accel-buffering': 'no',
  });
  let latest: JobState | undefined;
  const send = (state: JobState): void => {
    // A client that does not read gets the newest state when it reads again, not every step.
    if (out.writableNeedDrain) {
      latest = state;
      return;
    }
    out.write(`id: ${state.version}\nevent: job\ndata: ${JSON.stringify(state.view)}\n\n`);
    if (isEnded(state.view)) end();
  };
  const onDrain = (): void => {
    const state = latest;
    latest = undefined;
    if (state !== undefined) send(state);
  };
  const heartbeat = setInterval(() => {
    if (!out.writableNeedDrain) out.write(': still here\n\n');
  }, HEARTBEAT_MS);
  const unwatch = jobs.watch(id, send);
  const end = (): void => {
    clearInterval(heartbeat);
    unwatch();
    forget();
    out.off('drain', onDrain);
    out.end();
  };
  const forget = streams.add(end);
  out.on('drain', onDrain);
  out.on('error', end);
  out.on('close', end);
  out.write('retry: 1000\n\n');
  send(now);
}
