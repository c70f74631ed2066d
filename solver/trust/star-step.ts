import { chordBits } from './walk-chords.ts';
import { LOST, type Walker, type WalkStage } from './walker.ts';

/**
 * One step across the part of a disc that a walker in a plain medium sees: to the rim of the disc or to the first
 * reflecting wall on the way, in a direction even over the circle (over the half circle from a wall).
 *
 * The disc holds no other kind of wall and no rim, so what the walker sees is star-shaped and the harmonic measure of
 * its centre is the angle; the time is ∫G of the disc along the ray: ρ²/(4D) + ρ²/(2D)·ln(R/ρ).
 *
 * Source: walk on stars, Sawhney, Miller, Gkioulekas & Crane 2023; walk on spheres, Muller 1956.
 *
 * @param radius R > 0
 */
export function starStep(stage: WalkStage, walker: Walker, radius: number): void {
  const { tree, twoSided } = stage.geometry;
  const { ends } = tree;
  const { x, y, on } = walker;
  const turn = stage.random.uniform();
  let dx: number;
  let dy: number;
  if (on >= 0) {
    const c = 4 * on;
    const ux = ends[c + 2] - ends[c];
    const uy = ends[c + 3] - ends[c + 1];
    const length = Math.sqrt(ux * ux + uy * uy);
    const angle = Math.PI * turn;
    const along = Math.cos(angle) / length;
    const away = (walker.side * Math.sin(angle)) / length;
    dx = along * ux - away * uy;
    dy = along * uy + away * ux;
  } else {
    const angle = 2 * Math.PI * turn;
    dx = Math.cos(angle);
    dy = Math.sin(angle);
  }
  tree.firstHit(x, y, dx, dy, radius, chordBits.reflecting, on);
  const way = tree.distance;
  walker.x = x + way * dx;
  walker.y = y + way * dy;
  walker.time += timeAlong(way, radius) / walker.medium.constantDiffusion;
  walker.on = tree.index;
  if (tree.index >= 0) standOn(stage, walker, x, y, twoSided[tree.index] === 1);
}

/** ∫₀^ρ ln(R/r) r dr; 0 at ρ = 0. */
function timeAlong(way: number, radius: number): number {
  if (way >= radius) return (radius * radius) / 4;
  return way > 0 ? way * way * (0.25 + 0.5 * Math.log(radius / way)) : 0;
}

/** Puts the walker a little off the chord it met, on the side it came from. */
function standOn(stage: WalkStage, walker: Walker, fromX: number, fromY: number, twoSided: boolean): void {
  const { ends } = stage.geometry.tree;
  const c = 4 * walker.on;
  const ux = ends[c + 2] - ends[c];
  const uy = ends[c + 3] - ends[c + 1];
  const came = ux * (fromY - ends[c + 1]) - uy * (fromX - ends[c]);
  walker.side = twoSided && came < 0 ? -1 : 1;
  const off = (walker.side * stage.aside) / Math.sqrt(ux * ux + uy * uy);
  walker.x -= off * uy;
  walker.y += off * ux;
}

/**
 * One step to the rim of a disc that holds no wall and no border, in a medium with one D and one rate c of being lost:
 * lost on the way with chance 1 − 1/I₀(z), z = R√(c/D), after a mean time (1 − 1/I₀(z))/c in all.
 *
 * Source: E e^{−cτ} = 1/I₀(z) (Borodin & Salminen 2002, recalled).
 */
export function discStep(stage: WalkStage, walker: Walker, radius: number): void {
  const { random } = stage;
  const { medium } = walker;
  const d = medium.constantDiffusion;
  const c = medium.constantRate;
  const angle = 2 * Math.PI * random.uniform();
  walker.on = -1;
  if (c > 0) {
    const lostChance = oneLessInverseI0((radius * radius * c) / (4 * d));
    walker.time += lostChance / c;
    if (random.uniform() < lostChance) {
      endByRate(stage, walker);
      return;
    }
  } else walker.time += (radius * radius) / (4 * d);
  walker.x += radius * Math.cos(angle);
  walker.y += radius * Math.sin(angle);
}

/** Ends a walker that was lost or caught by the floor where it is. */
export function endByRate({ random }: WalkStage, walker: Walker): void {
  const { floorExit, floorPart } = walker.medium;
  walker.end = floorExit >= 0 && random.uniform() < floorPart(walker.x, walker.y) ? floorExit : LOST;
}

/** 1 − 1/I₀(2√q) = s/(1 + s) with s = Σ_{k≥1} q^k/(k!)², free of cancellation (Abramowitz & Stegun 1964, 9.6.10). */
function oneLessInverseI0(q: number): number {
  // Beyond 2√q = 600 nothing is left of 1/I₀, and the series would overflow.
  if (q > 9e4) return 1;
  let term = 1;
  let sum = 0;
  for (let k = 1; k < 1000; k++) {
    term *= q / (k * k);
    sum += term;
    if (term < 1e-17 * sum) break;
  }
  return sum / (1 + sum);
}
