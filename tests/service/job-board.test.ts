import { expect, it } from 'vitest';
import { CaseError } from '../../src/case/errors.ts';
import { WorkError } from '../../src/run/failure.ts';
import { JobBoard, type JobState, type Watch } from '../../src/service/job-board.ts';

interface Begun {
  layout: string;
  watch: Watch;
  end: (error?: Error) => Promise<void>;
}

/** A board whose solves begin when it says so and end when the test says so. */
const boardOf = (threads: number, answered: readonly string[] = []) => {
  const begun: Begun[] = [];
  const faults: string[] = [];
  const board = new JobBoard({
    threads,
    solve: (_slot, _caseId, layout, watch) =>
      new Promise((resolve, reject) => {
        const end = async (error?: Error) => {
          if (error === undefined) resolve();
          else reject(error);
          await new Promise((next) => setImmediate(next));
        };
        begun.push({ layout, watch, end });
      }),
    isAnswered: (_caseId, layout) => answered.includes(layout),
    onFault: (trace) => faults.push(trace),
  });
  const names = () => begun.map(({ layout }) => layout);
  return { board, begun, names, faults };
};

const stopped = () =>
  new WorkError({ kind: 'stopped', code: 'STOPPED', what: 'stopped', where: {}, remedy: 'again' });

it('runs one solve per thread and then the newest asked', async () => {
  const { board, begun, names } = boardOf(1);
  for (const layout of ['a', 'b', 'c']) board.ask('case', layout);
  expect(board.counts).toEqual({ waiting: 2, running: 1 });
  await begun[0]?.end();
  expect(names()).toEqual(['a', 'c']);
});

it('asks a layout once that waits or runs already, and moves it to the front', async () => {
  const { board, begun, names } = boardOf(1);
  const first = board.ask('case', 'a');
  const waiting = board.ask('case', 'b');
  board.ask('case', 'c');
  expect(board.ask('case', 'a').id).toBe(first.id);
  expect(board.ask('case', 'b').id).toBe(waiting.id);
  await begun[0]?.end();
  expect(names()).toEqual(['a', 'b']);
});

it('is done at once with a layout that was answered before', () => {
  const { board, names } = boardOf(1, ['a']);
  expect(board.ask('case', 'a')).toMatchObject({ state: 'done', done: 1 });
  expect(names()).toEqual([]);
});

it('never begins a waiting job that was cancelled', async () => {
  const { board, begun, names } = boardOf(1);
  board.ask('case', 'a');
  const { id } = board.ask('case', 'b');
  expect(board.cancel(id).state).toBe('stopped');
  await begun[0]?.end();
  expect(names()).toEqual(['a']);
});

it('says a running job is stopped at once, tells its solve, and keeps its thread until that has ended', async () => {
  const { board, begun, names } = boardOf(1);
  const { id } = board.ask('case', 'a');
  board.ask('case', 'b');
  expect(board.cancel(id).state).toBe('stopped');
  expect(begun[0]?.watch.signal.aborted).toBe(true);
  expect(names()).toEqual(['a']);
  await begun[0]?.end(stopped());
  expect(names()).toEqual(['a', 'b']);
  expect(board.state(id).view.state).toBe('stopped');
});

it('leaves a stopped job stopped, whatever its solve then ends with', async () => {
  for (const late of [
    undefined,
    stopped(),
    new CaseError('NO_WAY_OUT', 'Nothing catches', {}, 'Add a pad'),
  ]) {
    const { board, begun } = boardOf(1);
    const { view } = board.state(board.ask('case', 'a').id);
    const after = board.cancel(view.id);
    await begun[0]?.end(late);
    expect(board.state(view.id).view).toEqual(after);
  }
});

it('numbers the changes of a job upwards and never goes back in what is done', async () => {
  const { board, begun } = boardOf(1);
  const { id } = board.ask('case', 'a');
  const seen: JobState[] = [];
  board.watch(id, (state) => seen.push(state));
  begun[0]?.watch.progress('meshing', 0.4);
  begun[0]?.watch.progress('solving', 0.2);
  await begun[0]?.end();
  begun[0]?.watch.progress('late word', 0.1);
  expect(seen.map(({ view }) => [view.doing, view.done])).toEqual([
    ['meshing', 0.4],
    ['solving', 0.4],
    ['done', 1],
  ]);
  const versions = seen.map(({ version }) => version);
  expect(versions).toEqual([...new Set(versions)].sort((a, b) => a - b));
});

it('keeps why a solve was refused, and goes on with the next', async () => {
  const { board, begun, names, faults } = boardOf(1);
  const { id } = board.ask('case', 'a');
  board.ask('case', 'b');
  await begun[0]?.end(new CaseError('NO_WAY_OUT', 'Nothing catches', { key: 'layouts.a' }, 'Add a pad'));
  expect(board.state(id).view).toMatchObject({ state: 'failed', error: { code: 'NO_WAY_OUT' } });
  expect([names(), faults]).toEqual([['a', 'b'], []]);
});

it('tells a fault of our own to the log and not to the client', async () => {
  const { board, begun, faults } = boardOf(1);
  const { id } = board.ask('case', 'a');
  await begun[0]?.end(new TypeError('inner words'));
  expect(faults.join()).toContain('inner words');
  expect(JSON.stringify(board.state(id).view)).not.toContain('inner words');
});

it('refuses more than it can queue, and forgets ended jobs before others', async () => {
  const { board, begun } = boardOf(1);
  const { id } = board.ask('case', 'first');
  for (let i = 0; i < 100; i++) board.ask('case', `layout ${i}`);
  expect(() => board.ask('case', 'one too many')).toThrow(CaseError);
  await begun[0]?.end();
  for (let i = 0; i < 700; i++) board.cancel(board.ask('case', `short ${i}`).id);
  expect(() => board.state(id)).toThrow('no job');
  expect(board.counts).toEqual({ waiting: 99, running: 1 });
});
