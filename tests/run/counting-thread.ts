import { CaseError } from '../../src/case/errors.ts';
import { serveThread } from '../../src/run/serve-thread.ts';

/** What the thread of these tests can be told to do. */
export type Order =
  | { do: 'count'; to: number }
  | { do: 'count until stopped' }
  | { do: 'hang' }
  | { do: 'fill the heap' }
  | { do: 'recurse'; depth: number }
  | { do: 'hand over'; length: number }
  | { do: 'refuse' }
  | { do: 'break' };

const dive = (depth: number): number => (depth === 0 ? 0 : 1 + dive(depth - 1));

serveThread<Order, number | Float64Array>((order, { stop, progress }) => {
  switch (order.do) {
    case 'count':
      for (let i = 0; i < order.to; i++) progress(`number ${i}`, i / order.to);
      return { result: order.to, buffers: [] };
    case 'count until stopped':
      progress('counting', 0);
      for (;;) {
        if (stop()) throw new CaseError('STOPPED_HERE', 'The count ended', {}, 'Count again');
      }
    case 'hang':
      progress('hanging', 0);
      for (;;) {
        // Never asks `stop`: only the end of its thread ends it.
      }
    case 'fill the heap': {
      const kept: object[] = [];
      for (;;) kept.push({ kept: [kept.length, kept.length + 1] });
    }
    case 'recurse':
      return { result: dive(order.depth), buffers: [] };
    case 'hand over': {
      const array = new Float64Array(order.length).fill(7);
      return { result: array, buffers: [array.buffer] };
    }
    case 'refuse':
      throw new CaseError('NOT_A_CASE', 'This is no case', { key: 'drawing', line: 3 }, 'Give a case');
    case 'break':
      throw new TypeError('secret inner words');
  }
});
