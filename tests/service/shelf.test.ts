import { expect, it } from 'vitest';
import { Shelf } from '../../src/service/shelf.ts';

it('puts away the longest unused when there are too many', () => {
  const shelf = new Shelf<number>({ count: 2, bytes: 100 });
  shelf.put('a', 1, 1);
  shelf.put('b', 2, 1);
  shelf.get('a');
  shelf.put('c', 3, 1);
  expect([shelf.get('a'), shelf.get('b'), shelf.get('c')]).toEqual([1, undefined, 3]);
});

it('puts away by bytes, but never the newest', () => {
  const shelf = new Shelf<number>({ count: 10, bytes: 100 });
  shelf.put('a', 1, 60);
  shelf.put('b', 2, 60);
  expect([shelf.get('a'), shelf.get('b')]).toEqual([undefined, 2]);
  shelf.put('huge', 3, 1000);
  expect([shelf.count, shelf.get('huge')]).toEqual([1, 3]);
});

it('counts a value that takes the place of another once', () => {
  const shelf = new Shelf<number>({ count: 10, bytes: 100 });
  shelf.put('a', 1, 90);
  shelf.put('a', 2, 90);
  shelf.put('b', 3, 10);
  expect([shelf.get('a'), shelf.get('b')]).toEqual([2, 3]);
});
