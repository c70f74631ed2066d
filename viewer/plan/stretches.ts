import type { LayoutView, LoopView, WallView } from '../../src/service/contract.ts';

/** The wall of a layout, cut into what catches and what turns back, ready to be drawn on plan and strip. */

export interface Stretch {
  /** Index into `LayoutView.walls`. */
  readonly id: number;
  readonly wall: WallView;
  readonly loop: LoopView;
  /** The whole of a closed loop. */
  readonly whole: boolean;
  readonly post: boolean;
}

/** One line of wall that turns back, as long as nothing else comes between. */
export interface PlainRun {
  readonly points: readonly (readonly [number, number])[];
  readonly closed: boolean;
}

type Point = readonly [number, number];

const same = (a: Point | undefined, b: Point | undefined): boolean =>
  a !== undefined && b !== undefined && a[0] === b[0] && a[1] === b[1];

/** Length of a stretch along its loop; `from` > `to` runs over the mark. */
export function stretchLength(wall: WallView, loop: LoopView): number {
  const span = wall.to - wall.from;
  return span > 0 ? span : span + loop.length;
}

/** The stretches that catch, strongly or weakly. */
export function catchingStretches(layout: LayoutView): Stretch[] {
  return layout.walls.flatMap((wall, id) => {
    const loop = layout.loops.find((one) => one.name === wall.loop);
    if (loop === undefined || wall.kind === 'reflecting') return [];
    const whole = loop.role !== 'inner wall' && stretchLength(wall, loop) > loop.length * (1 - 1e-9);
    return [{ id, wall, loop, whole, post: loop.role === 'hole' }];
  });
}

/** The wall that turns back, neighbouring stretches joined, so that corners are drawn as corners. */
export function plainRuns(layout: LayoutView): PlainRun[] {
  const runs: Point[][] = [];
  for (const loop of layout.loops) {
    const own: Point[][] = [];
    for (const wall of layout.walls) {
      if (wall.loop !== loop.name || wall.kind !== 'reflecting') continue;
      const last = own.at(-1);
      if (last !== undefined && same(last.at(-1), wall.points[0])) last.push(...wall.points.slice(1));
      else own.push([...wall.points]);
    }
    const [first, last] = [own[0], own.at(-1)];
    if (first !== undefined && last !== undefined && first !== last && same(last.at(-1), first[0])) {
      last.push(...first.slice(1));
      own.shift();
    }
    runs.push(...own);
  }
  return runs.map((points) => {
    const closed = points.length > 3 && same(points[0], points.at(-1));
    return { points: closed ? points.slice(0, -1) : points, closed };
  });
}

/** Loops on which nothing catches, and those on which something does, in the order of the drawing. */
export function loopsByUse(layout: LayoutView): { used: LoopView[]; idle: LoopView[] } {
  const busy = new Set(catchingStretches(layout).map((stretch) => stretch.loop.name));
  const used = layout.loops.filter((loop) => loop.role === 'outline' || busy.has(loop.name));
  return { used, idle: layout.loops.filter((loop) => !used.includes(loop)) };
}
