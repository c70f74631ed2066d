import { afterAll, expect, it } from 'vitest';
import { WorkError } from '../../src/run/failure.ts';
import { threadFile } from '../../src/run/thread-file.ts';
import { WorkThread } from '../../src/run/work-thread.ts';
import type { Order } from './counting-thread.ts';

const file = new URL('../tests/run/counting-thread.js', threadFile(''));
const thread = new WorkThread<Order, number | Float64Array>(file, { heapMb: 64, grace: 0.05 });
afterAll(() => thread.close());

const failureOf = async (work: Promise<unknown>) => {
  const error: unknown = await work.then(
    () => undefined,
    (reason) => reason,
  );
  expect(error).toBeInstanceOf(WorkError);
  return (error as WorkError).failure;
};

it('hears the stages of the work in order and then its result', async () => {
  const stages: string[] = [];
  const result = await thread.run({ do: 'count', to: 4 }, { progress: (stage) => stages.push(stage) });
  expect(result).toBe(4);
  expect(stages).toEqual(['number 0', 'number 1', 'number 2', 'number 3']);
});

it('hands an array over whole', async () => {
  const result = await thread.run({ do: 'hand over', length: 1000 });
  expect(result).toEqual(new Float64Array(1000).fill(7));
});

it('carries a refusal across with code, place and remedy', async () => {
  expect(await failureOf(thread.run({ do: 'refuse' }))).toEqual({
    kind: 'case',
    code: 'NOT_A_CASE',
    what: 'This is no case',
    where: { key: 'drawing', line: 3 },
    remedy: 'Give a case',
  });
});

it('keeps the words of a program fault for the log', async () => {
  const { trace, ...shown } = await failureOf(thread.run({ do: 'break' }));
  expect(shown.kind).toBe('fault');
  expect(JSON.stringify(shown)).not.toContain('secret');
  expect(trace).toContain('secret inner words');
});

it('ends work that asks whether to stop, and does the next in the same thread', async () => {
  const cancel = new AbortController();
  const work = thread.run(
    { do: 'count until stopped' },
    { signal: cancel.signal, progress: () => cancel.abort() },
  );
  expect((await failureOf(work)).kind).toBe('stopped');
  expect(await thread.run({ do: 'count', to: 2 })).toBe(2);
});

it('ends the thread of work that never asks, and starts another for the next', async () => {
  const cancel = new AbortController();
  const work = thread.run({ do: 'hang' }, { signal: cancel.signal, progress: () => cancel.abort() });
  expect((await failureOf(work)).code).toBe('STOPPED');
  expect(await thread.run({ do: 'count', to: 3 })).toBe(3);
});

it('ends work at its limit of time, whether it asks or not', async () => {
  for (const order of ['count until stopped', 'hang'] as const) {
    const failure = await failureOf(thread.run({ do: order }, { seconds: 0.05 }));
    expect([failure.kind, failure.code]).toEqual(['limit', 'TIME_LIMIT']);
  }
});

it('outlives work that fills its heap', async () => {
  const failure = await failureOf(thread.run({ do: 'fill the heap' }));
  expect([failure.kind, failure.code]).toEqual(['limit', 'MEMORY_LIMIT']);
  expect(await thread.run({ do: 'count', to: 1 })).toBe(1);
});

it('has a stack for deep recursion, and calls one deeper than that a limit', async () => {
  // Node's own default of about 1 MB ends near depth 10,000.
  expect(await thread.run({ do: 'recurse', depth: 200_000 })).toBe(200_000);
  expect((await failureOf(thread.run({ do: 'recurse', depth: 50_000_000 }))).code).toBe('TOO_DEEP');
});

it('refuses work once closed, and fails what was in hand', async () => {
  const own = new WorkThread<Order, number | Float64Array>(file);
  const inHand = failureOf(own.run({ do: 'hang' }));
  await own.close();
  expect((await inHand).kind).toBe('stopped');
  expect((await failureOf(own.run({ do: 'count', to: 1 }))).kind).toBe('stopped');
});
