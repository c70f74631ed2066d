import type { LayoutView } from '../../src/service/contract.ts';
import { svg } from '../page/dom.ts';
import { chevronPath, chevrons, dotPlaces, GLYPH_SCALE, glyphSizes, markStroke } from './glyphs.ts';
import type { Hidden } from './hidden.ts';
import { type Px, pathOf, refined } from './polyline.ts';
import type { Projection } from './projection.ts';
import { catchingStretches, plainRuns, type Stretch } from './stretches.ts';

/** Draws the wall of the compartment, on the sheet, with the view of the surface. */

/** The parts of a line on the sheet that the surface does not cover, in px. */
export function visibleRuns(points: readonly Px[], view: Projection, hidden: Hidden, height = 0): Px[][] {
  if (view.lift === 0) return [points.map(([x, y]) => view.at(x, y, 0))];
  const runs: Px[][] = [];
  let run: Px[] = [];
  for (const [x, y] of refined(points, 6 / view.scale)) {
    if (hidden(x, y, height)) {
      if (run.length > 1) runs.push(run);
      run = [];
    } else run.push(view.at(x, y, height));
  }
  if (run.length > 1) runs.push(run);
  return runs;
}

function linePath(runs: readonly Px[][], closed: boolean, whole: boolean): string {
  return runs.map((run) => pathOf(run, closed && whole)).join('');
}

function catching(stretch: Stretch, view: Projection, hidden: Hidden, k: number): SVGElement[] {
  const sizes = glyphSizes(k);
  const weak = stretch.wall.kind === 'partlyAbsorbing';
  const flat = stretch.wall.points.map(([x, y]): Px => view.at(x, y, 0));
  const line = linePath(visibleRuns(stretch.wall.points, view, hidden), stretch.whole, view.lift === 0);
  const width = weak ? sizes.dot : sizes.catches;
  const seen = (px: Px) => view.lift === 0 || !hidden(...view.back(...px), 0);
  const marks = chevrons(flat, sizes, { weak, post: stretch.whole && stretch.post }).filter(({ feet }) =>
    seen([(feet[0][0] + feet[1][0]) / 2, (feet[0][1] + feet[1][1]) / 2]),
  );
  const parts: SVGElement[] = [
    svg('path', { class: 'casing', d: line, 'stroke-width': width + sizes.casing }),
  ];
  if (weak) {
    const dots = dotPlaces(flat, sizes)
      .filter(({ at }) => seen(at))
      .map(({ at }) => `M${at[0].toFixed(1)} ${at[1].toFixed(1)}h0`);
    parts.push(svg('path', { class: 'catch dots', d: dots.join(''), 'stroke-width': sizes.dot }));
  } else {
    parts.push(svg('path', { class: 'catch', d: line, 'stroke-width': sizes.catches }));
  }
  parts.push(svg('path', { class: 'catch chevrons', d: chevronPath(marks), 'stroke-width': sizes.stroke }));
  return parts;
}

/** All wall glyphs of a layout. `lit` is the stretch under the hand. */
export function wallOverlay(
  layout: LayoutView,
  view: Projection,
  hidden: Hidden,
  lit: number | undefined,
): SVGGElement {
  const k = view.lift === 0 ? GLYPH_SCALE.plan : GLYPH_SCALE.lifted;
  const sizes = glyphSizes(k);
  const group = svg('g', { class: 'walls' });
  const runs = plainRuns(layout).map((run) => {
    const points = run.closed && view.lift > 0 ? [...run.points, run.points[0] ?? [0, 0]] : run.points;
    return linePath(visibleRuns(points as Px[], view, hidden), run.closed, view.lift === 0);
  });
  const stretches = catchingStretches(layout);
  const marked = stretches.find((stretch) => stretch.id === lit);
  if (marked !== undefined) {
    const d = linePath(visibleRuns(marked.wall.points, view, hidden), marked.whole, view.lift === 0);
    group.append(svg('path', { class: 'lit', d, 'stroke-width': 22 }));
  }
  for (const d of runs) {
    group.append(svg('path', { class: 'casing', d, 'stroke-width': sizes.turnsBack + sizes.casing }));
  }
  for (const d of runs) group.append(svg('path', { class: 'plain', d, 'stroke-width': sizes.turnsBack }));
  for (const stretch of stretches) group.append(...catching(stretch, view, hidden, k));
  return group;
}

/** The marks of s = 0. On the lifted view only that of the outline, and only where it is seen. */
export function originMarks(layout: LayoutView, view: Projection, hidden: Hidden): SVGGElement {
  const group = svg('g', { class: 'origins' });
  const k = view.lift === 0 ? GLYPH_SCALE.plan : GLYPH_SCALE.lifted;
  for (const loop of layout.loops) {
    if (view.lift > 0 && (loop.role !== 'outline' || hidden(loop.mark[0], loop.mark[1], 0))) continue;
    const at = view.at(loop.mark[0], loop.mark[1], 0);
    const out = outwardPx(loop, view);
    const [from, to] = markStroke(at, out, k, loop.role !== 'outline');
    const d = pathOf([from, to]);
    group.append(
      svg('path', { class: 'casing', d, 'stroke-width': 1.4 + 2.6 * k }),
      svg('path', { class: 'plain', d, 'stroke-width': 1.4 }),
    );
  }
  return group;
}

/** Unit vector out of the compartment at the mark of a loop, as seen on the page. */
export function outwardPx(
  loop: { readonly mark: readonly [number, number]; readonly outward: readonly [number, number] },
  view: Projection,
): Px {
  const [x, y] = loop.mark;
  const step = 8 / view.scale;
  const [ax, ay] = view.at(x, y, 0);
  const [bx, by] = view.at(x + step * loop.outward[0], y + step * loop.outward[1], 0);
  const size = Math.hypot(bx - ax, by - ay) || 1;
  return [(bx - ax) / size, (by - ay) / size];
}
