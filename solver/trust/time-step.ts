import { endByRate } from './star-step.ts';
import { chordBits } from './walk-chords.ts';
import { WALKING, type Walker, type WalkStage } from './walker.ts';
import {
  crossingWall,
  nearestFeature,
  putOffWall,
  stepReach,
  type WallAhead,
  wallAhead,
} from './wall-ahead.ts';

/** Work space of the steps: two numbers of a drift. */
const push = new Float64Array(2);

/**
 * One step in time: X* = X + α√(2D(X)Δt)ξ, ΔX = bΔt + √(2D(X*)Δt)ξ with the same ξ; then what the nearest wall does to
 * it, as if the wall were straight. Lengths fall near corners, ends of walls and borders.
 *
 * Sources: Hütter & Öttinger 1998 for the predictor (recalled; at jumps of D METHODS 7, checked against exact values);
 * Gobet 2000 for walls as half-planes.
 */
export function timeStep(stage: WalkStage, walker: Walker): void {
  const { geometry, random, lengths } = stage;
  const { tree, alpha, hasBorders } = geometry;
  const { x, y, medium } = walker;
  walker.on = -1;
  let length = lengths.far;
  let border = -1;
  if (hasBorders) {
    tree.nearest(x, y, chordBits.border, stepReach * length);
    border = tree.index;
    // One length for all places from which the border can be crossed: what goes to either side is right for steps of one
    // size only, wherever the next one starts.
    if (border >= 0) length = Math.min(length, Math.max(tree.distance / stepReach, lengths.border));
  }
  const wall = wallAhead(stage, x, y, length);
  length = wall.length;
  const here = medium.diffusion(x, y);
  const most = border < 0 ? here : Math.max(here, acrossBorder(stage, border, x, y));
  let dt = (length * length) / (2 * most);
  push[0] = 0;
  push[1] = 0;
  if (medium.drift) {
    medium.drift(x, y, push);
    // Péclet number of a step at most the scale.
    const speed2 = push[0] * push[0] + push[1] * push[1];
    const longest = lengths.scale * here;
    if (speed2 * length * length > longest * longest) dt = (longest * longest) / (2 * most * speed2);
  }
  const rate = medium.rate ? medium.rate(x, y) : 0;
  if (rate > 0) dt = Math.min(dt, (0.2 * lengths.scale * lengths.scale) / rate);
  random.normals();
  const { first, second } = random;
  let there = here;
  if (alpha > 0 && (border >= 0 || Number.isNaN(medium.constantDiffusion))) {
    const ahead = alpha * Math.sqrt(2 * here * dt);
    there = diffusionAhead(stage, walker, wall, x + ahead * first, y + ahead * second, border >= 0);
  }
  if (rate > 0) {
    const u = random.uniform();
    if (u < -Math.expm1(-rate * dt)) {
      walker.time -= Math.log1p(-u) / rate;
      endByRate(stage, walker);
      return;
    }
  }
  const spread = Math.sqrt(2 * there * dt);
  const dx = push[0] * dt + spread * first;
  const dy = push[1] * dt + spread * second;
  move(stage, walker, wall, dx, dy, there * dt, dt);
  if (walker.end === WALKING && (border >= 0 || wall.crossed)) {
    walker.medium = geometry.mediumOf(geometry.maskAt(walker.x, walker.y));
  }
}

/** The larger D of the two sides of a border, there where it is nearest to the walker. */
function acrossBorder({ geometry }: WalkStage, border: number, x: number, y: number): number {
  const { tree, sides, mediumOf } = geometry;
  nearestFeature(tree, border, x, y);
  const left = mediumOf(sides[2 * border]).diffusion(tree.footX, tree.footY);
  const right = mediumOf(sides[2 * border + 1]).diffusion(tree.footX, tree.footY);
  return Math.max(left, right);
}

/**
 * D at the predicted place. Beyond a wall it is that of the medium at the wall, continued: regions end at walls, but D
 * as a function goes on, and a mirrored place would bend it.
 */
function diffusionAhead(
  stage: WalkStage,
  walker: Walker,
  wall: WallAhead,
  x: number,
  y: number,
  nearBorder: boolean,
): number {
  const { geometry, aside } = stage;
  let clampedX = x;
  let clampedY = y;
  if (wall.index >= 0) {
    const beyond = wall.distance + (x - walker.x) * wall.normalX + (y - walker.y) * wall.normalY - aside;
    if (beyond < 0) {
      clampedX -= beyond * wall.normalX;
      clampedY -= beyond * wall.normalY;
    }
  }
  const medium = nearBorder ? geometry.mediumOf(geometry.maskAt(clampedX, clampedY)) : walker.medium;
  if (!Number.isNaN(medium.constantDiffusion)) return medium.constantDiffusion;
  if (clampedX === x && clampedY === y) return medium.diffusion(x, y);
  const continued = medium.continuedDiffusion(x, y);
  return continued > 0 ? continued : medium.diffusion(clampedX, clampedY);
}

/** Takes the displacement as far as the walls let it: caught, pushed back or let through. */
function move(
  stage: WalkStage,
  walker: Walker,
  wall: WallAhead,
  dx: number,
  dy: number,
  spread: number,
  dt: number,
): void {
  const { geometry, random } = stage;
  let newX = walker.x + dx;
  let newY = walker.y + dy;
  wall.crossed = false;
  if (wall.index >= 0) {
    const w = dx * wall.normalX + dy * wall.normalY;
    const kind = geometry.tree.bits[wall.index];
    if (kind === chordBits.absorbing) {
      const d1 = wall.distance + w;
      // Chance that a Brownian bridge meets the wall: exp(−d₀d₁/(DΔt)) (Gobet 2000).
      if (d1 <= 0 || random.uniform() < Math.exp((-wall.distance * d1) / spread)) {
        walker.time += hittingTime(stage, wall.distance, Math.abs(d1), spread, dt);
        walker.end = geometry.exit[wall.index];
        return;
      }
    } else {
      // Lowest point of the bridge, then Skorokhod's push (Asmussen, Glynn & Pitman 1995 for the exact pair).
      const low = 0.5 * (w - Math.sqrt(w * w - 4 * spread * Math.log(random.uniform())));
      const pushed = Math.max(0, -wall.distance - low);
      if (pushed > 0) {
        newX += pushed * wall.normalX;
        newY += pushed * wall.normalY;
        if (kind !== chordBits.reflecting) {
          const met = 1 - Math.exp((-wallRate(stage, walker, wall) * pushed * dt) / spread);
          if (random.uniform() < met) {
            if (kind === chordBits.partlyAbsorbing) {
              walker.time += dt / 2;
              walker.end = geometry.exit[wall.index];
              return;
            }
            const past = 2 * (wall.distance + w + pushed);
            newX -= past * wall.normalX;
            newY -= past * wall.normalY;
            wall.crossed = true;
          }
        }
      }
    }
  }
  walker.time += dt;
  settle(stage, walker, wall, newX, newY);
}

/**
 * κ, or P m̄/m of the side the walker is on: n·D∇u + κu = 0 is caught at the rate κ/D_nn per push; through a permeable
 * wall J·n = P m̄(p₁/m₁ − p₂/m₂) (METHODS 2; Lejay 2016 for the process).
 */
function wallRate({ geometry }: WalkStage, walker: Walker, wall: WallAhead): number {
  const { tree, coefficient, alpha, mediumOf, maskAt } = geometry;
  const value = coefficient[wall.index];
  if (tree.bits[wall.index] === chordBits.partlyAbsorbing || alpha === 1) return value;
  const off = 1e-7 * geometry.size;
  const footX = walker.x - (wall.distance + off) * wall.normalX;
  const footY = walker.y - (wall.distance + off) * wall.normalY;
  const here = walker.medium.diffusion(walker.x, walker.y) ** (alpha - 1);
  const there = mediumOf(maskAt(footX, footY)).diffusion(footX, footY) ** (alpha - 1);
  return (value * (here + there)) / (2 * here);
}

/** Puts the walker down, back from any wall that the straight way leads through. */
function settle(stage: WalkStage, walker: Walker, wall: WallAhead, toX: number, toY: number): void {
  const { geometry } = stage;
  const { tree } = geometry;
  let newX = toX;
  let newY = toY;
  for (let tries = 0; tries < 4; tries++) {
    const met = crossingWall(stage, walker.x, walker.y, newX, newY, wall.crossed);
    if (met < 0) {
      walker.x = newX;
      walker.y = newY;
      if (wall.index >= 0) putOffWall(stage, walker, wall.index);
      return;
    }
    if (tree.bits[met] === chordBits.absorbing) {
      walker.end = geometry.exit[met];
      return;
    }
    const side = sideOf(tree.ends, met, walker.x, walker.y);
    nearestFeature(tree, met, newX, newY);
    if (tree.bits[met] === chordBits.partlyAbsorbing) {
      const over = Math.hypot(newX - tree.footX, newY - tree.footY);
      const d = walker.medium.diffusion(walker.x, walker.y);
      if (stage.random.uniform() < 1 - Math.exp((-geometry.coefficient[met] * over) / d)) {
        walker.end = geometry.exit[met];
        return;
      }
    }
    const e = 4 * met;
    const ux = tree.ends[e + 2] - tree.ends[e];
    const uy = tree.ends[e + 3] - tree.ends[e + 1];
    const off = (side * stage.aside) / Math.hypot(ux, uy);
    newX = tree.footX - off * uy;
    newY = tree.footY + off * ux;
  }
  // A corner too sharp for the step: the walker stays where it was, and its time runs.
}

function sideOf(ends: Float64Array, chord: number, x: number, y: number): 1 | -1 {
  const e = 4 * chord;
  const left = (ends[e + 2] - ends[e]) * (y - ends[e + 1]) - (ends[e + 3] - ends[e + 1]) * (x - ends[e]);
  return left >= 0 ? 1 : -1;
}

/**
 * When a Brownian bridge that meets the wall meets it: τ/(Δt − τ) is inverse Gaussian with mean d₀/|d₁| and shape
 * d₀²/(2DΔt), drawn by Michael, Schucany & Haas 1976.
 *
 * @param spread DΔt
 */
function hittingTime({ random }: WalkStage, d0: number, d1: number, spread: number, dt: number): number {
  if (!(d0 > 0)) return 0;
  const shape = (d0 * d0) / (2 * spread);
  random.normals();
  const chi = random.first * random.first;
  if (!(d1 > 1e-9 * d0)) return (dt * shape) / (shape + chi);
  const mean = d0 / d1;
  const a = (mean * mean * chi) / (2 * shape);
  const root = mean + a - (mean / (2 * shape)) * Math.sqrt(4 * mean * shape * chi + mean * mean * chi * chi);
  const z = random.uniform() * (mean + root) <= mean ? root : (mean * mean) / root;
  return z > 0 ? (dt * z) / (1 + z) : 0;
}
