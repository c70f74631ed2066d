import { survivalDefaults, valueFromStart } from '../../solver/index.ts';
import type { Asked, Case } from '../case/case.ts';
import type { SolvedFields } from './solved-fields.ts';
import type { Watch } from './times.ts';

/** A start as weights on the mesh nodes, with what the case asks of it. */
export interface AskedStart {
  readonly weights: Float64Array;
  readonly asked: readonly Asked[];
}

/** Name under which the arrivals at all exits together are kept: no wall or region can have it. */
const anyExit = 'all';

/** What of the survival is to be followed closely. */
export function watchedInside({ report }: Case, starts: readonly AskedStart[]): Watch {
  const remaining = new Set<number>(survivalDefaults.remaining);
  const times = new Set(report?.survivalAt);
  for (const { figure } of starts.flatMap(({ asked }) => asked)) {
    if (figure.kind === 'time to') remaining.add(1 - figure.fraction);
    if (figure.kind === 'still inside') times.add(figure.at);
  }
  return { starts: starts.map(({ weights }) => weights), remaining: [...remaining], times: [...times] };
}

/** By exit of which something is asked by a time: the starts that ask, and what they ask. */
export function watchedExits(fields: SolvedFields, starts: readonly AskedStart[]): Map<string, Watch> {
  const found = new Map<string, { starts: Set<Float64Array>; remaining: Set<number>; times: Set<number> }>();
  for (const { weights, asked } of starts) {
    for (const one of asked) {
      const exit = exitOf(fields, one);
      const field = exit === undefined ? undefined : chanceToEnd(fields, exit);
      if (exit === undefined || !field) continue;
      const total = valueFromStart(weights, field);
      if (!(total > 0)) continue;
      const watch = found.get(exit) ?? { starts: new Set(), remaining: new Set(), times: new Set() };
      found.set(exit, watch);
      watch.starts.add(weights);
      const { figure } = one;
      if (figure.kind === 'share' && figure.by !== undefined) watch.times.add(figure.by);
      const fraction = fractionOf(one);
      if (fraction !== undefined && fraction < total) watch.remaining.add(1 - fraction / total);
    }
  }
  return new Map(
    [...found].map(([exit, { starts: from, remaining, times }]) => [
      exit,
      { starts: [...from], remaining: [...remaining], times: [...times] },
    ]),
  );
}

/** The exit whose arrivals a figure needs; undefined where it needs none. */
export function exitOf({ shares }: SolvedFields, { figure, counts }: Asked): string | undefined {
  if (counts === 'caught') return shares.has('lost') ? anyExit : undefined;
  if (figure.kind === 'time to leave by') return figure.wall;
  return figure.kind === 'share' && figure.by !== undefined ? figure.wall : undefined;
}

/** The fraction whose time a figure asks for. */
export function fractionOf({ figure }: Asked): number | undefined {
  if (figure.kind === 'median') return 0.5;
  return figure.kind === 'time to' || figure.kind === 'time to leave by' ? figure.fraction : undefined;
}

/** Chance to end at an exit per mesh node; undefined for a wall that catches nothing in this layout. */
export function chanceToEnd({ shares }: SolvedFields, exit: string): Float64Array | undefined {
  if (exit !== anyExit) return shares.get(exit);
  const exits = [...shares].filter(([name]) => name !== 'lost').map(([, field]) => field);
  const [first, ...others] = exits;
  return first?.map((chance, i) => others.reduce((sum, field) => sum + (field[i] ?? 0), chance));
}
