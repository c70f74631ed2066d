import { request } from 'node:http';
import { connect } from 'node:net';
import { afterAll, beforeAll, expect, it } from 'vitest';
import type { CaseView, JobView } from '../../src/service/contract.ts';
import { type Running, startServer } from '../../src/service/server.ts';
import { room } from './served.ts';

let running: Running;
let theCase: CaseView;
beforeAll(async () => {
  running = await startServer({ port: 0, threads: 1, page: '/nowhere' });
  theCase = await send<CaseView>('POST', 'api/cases', { case: JSON.stringify(room) });
});
afterAll(() => running.close());

const send = async <T>(method: string, path: string, body?: unknown): Promise<T> => {
  const answer = await fetch(new URL(path, running.address), {
    method,
    ...(body !== undefined && {
      body: JSON.stringify(body),
      headers: { 'content-type': 'application/json' },
    }),
  });
  return (await answer.json()) as T;
};

const askFor = (layout: string, id = theCase.id) => send<JobView>('POST', 'api/jobs', { caseId: id, layout });

/** One event of a stream: its id and the job it carries. */
interface JobEvent {
  id: number;
  job: JobView;
}

/** Reads a job's events to the end of the stream; `on` sees each as it comes. */
const eventsOf = async (
  id: string,
  options: { headers?: Record<string, string>; on?: (event: JobEvent) => void; signal?: AbortSignal } = {},
) => {
  const answer = await fetch(new URL(`api/jobs/${id}/events`, running.address), {
    headers: options.headers ?? {},
    ...(options.signal && { signal: options.signal }),
  });
  const events: JobEvent[] = [];
  let text = '';
  const decoder = new TextDecoder();
  for await (const bytes of answer.body ?? []) {
    text += decoder.decode(bytes, { stream: true });
    const blocks = text.split('\n\n');
    text = blocks.pop() ?? '';
    for (const block of blocks) {
      const data = /^id: (\d+)\nevent: job\ndata: (.*)$/.exec(block);
      if (!data) continue;
      const event = { id: Number(data[1]), job: JSON.parse(data[2] ?? '') as JobView };
      events.push(event);
      options.on?.(event);
    }
  }
  return { status: answer.status, type: answer.headers.get('content-type'), headers: answer.headers, events };
};

it('listens on loopback only and takes the next port when one is taken', async () => {
  expect(running.address).toBe(`http://127.0.0.1:${running.port}/`);
  const second = await startServer({ port: running.port, threads: 1 });
  try {
    expect(second.port).toBeGreaterThan(running.port);
    expect((await fetch(new URL('health', second.address))).status).toBe(200);
  } finally {
    await second.close();
  }
});

it('does not open itself to other machines', async () => {
  for (const host of ['0.0.0.0', '::', '192.168.1.10']) {
    await expect(startServer({ port: 0, host })).rejects.toMatchObject({ code: 'HOST_NOT_LOCAL' });
  }
});

it('refuses a foreign Host over the wire', async () => {
  const status = await new Promise<number | undefined>((resolve, reject) => {
    const headers = { host: 'evil.example' };
    request({ host: '127.0.0.1', port: running.port, path: '/health', headers }, (answer) => {
      answer.resume();
      resolve(answer.statusCode);
    })
      .on('error', reject)
      .end();
  });
  expect(status).toBe(403);
});

it('answers bytes that are no HTTP with the one shape of errors', async () => {
  const text = await new Promise<string>((resolve, reject) => {
    let heard = '';
    const socket = connect(running.port, '127.0.0.1', () => socket.write('NONSENSE\r\n\r\n'));
    socket.on('data', (bytes) => {
      heard += bytes;
    });
    socket.on('end', () => resolve(heard));
    socket.on('error', reject);
  });
  expect(text).toMatch(/^HTTP\/1\.1 400 /);
  expect(JSON.parse(text.split('\r\n\r\n')[1] ?? '')).toMatchObject({ error: { code: 'REQUEST_REFUSED' } });
});

it('streams a solve to its end with rising ids, and with the headers of every answer', async () => {
  const { id } = await askFor('both pads');
  const { status, type, headers, events } = await eventsOf(id);
  expect([status, type]).toEqual([200, 'text/event-stream; charset=utf-8']);
  expect(headers.get('content-security-policy')).toContain("default-src 'none'");
  const ids = events.map((event) => event.id);
  expect(ids).toEqual([...new Set(ids)].sort((a, b) => a - b));
  const done = events.map(({ job }) => job.done);
  expect(done).toEqual([...done].sort((a, b) => a - b));
  expect(new Set(events.map(({ job }) => job.doing)).size).toBeGreaterThan(2);
  expect(events.at(-1)?.job).toMatchObject({ state: 'done', done: 1 });
});

it('sends the last state to whom comes late, and nothing more to whom has seen it', async () => {
  const { id } = await askFor('both pads');
  const first = await eventsOf(id);
  expect(first.events.map(({ job }) => job.state)).toEqual(['done']);
  const seen = String(first.events[0]?.id);
  expect((await eventsOf(id, { headers: { 'last-event-id': seen } })).status).toBe(204);
  const behind = await eventsOf(id, { headers: { 'last-event-id': 'no number' } });
  expect(behind.events).toHaveLength(1);
});

it('stops a solve in its middle, frees its thread and solves the layout when asked again', async () => {
  const { id } = await askFor('left and coat');
  const other = await askFor('no way out');
  let asked = false;
  const { events } = await eventsOf(id, {
    on: ({ job }) => {
      if (asked || job.state !== 'running' || job.done === 0) return;
      asked = true;
      void send('DELETE', `api/jobs/${id}`);
    },
  });
  expect(events.at(-1)?.job.state).toBe('stopped');
  expect(events.at(-1)?.job.done).toBeLessThan(1);
  // The thread goes on with the next job, which is refused for its own reasons.
  expect((await eventsOf(other.id)).events.at(-1)?.job.state).toBe('failed');
  const again = await askFor('left and coat');
  expect(again.id).not.toBe(id);
  expect((await eventsOf(again.id)).events.at(-1)?.job.state).toBe('done');
});

it('goes on with a solve whose listener has gone away', async () => {
  const fresh = await send<CaseView>('POST', 'api/cases', {
    case: JSON.stringify({ ...room, title: 'Room once more' }),
  });
  const { id } = await askFor('both pads', fresh.id);
  const away = new AbortController();
  await expect(eventsOf(id, { signal: away.signal, on: () => away.abort() })).rejects.toThrow();
  expect((await eventsOf(id)).events.at(-1)?.job.state).toBe('done');
});

it('ends work, streams and threads when it is closed', async () => {
  const own = await startServer({ port: 0, threads: 1 });
  const post = async <T>(path: string, body: unknown) => {
    const answer = await fetch(new URL(path, own.address), {
      method: 'POST',
      body: JSON.stringify(body),
      headers: { 'content-type': 'application/json' },
    });
    return (await answer.json()) as T;
  };
  const { id: caseId } = await post<CaseView>('api/cases', { case: JSON.stringify(room) });
  const { id } = await post<JobView>('api/jobs', { caseId, layout: 'both pads' });
  const stream = await fetch(new URL(`api/jobs/${id}/events`, own.address));
  const heard = stream.text();
  await own.close();
  await heard.catch(() => 'cut');
  await expect(fetch(new URL('health', own.address))).rejects.toThrow();
  expect(own.service.server.listening).toBe(false);
});
