import Flatbush from 'flatbush';
import {
  type Chain,
  chainLength,
  type Domain,
  directionAt,
  type Point,
  pointAt,
} from '../../mesher/index.ts';

/** A place where two walls face each other, and how far apart they are. */
export interface Gap {
  readonly at: Point;
  readonly width: number;
}

/** Rays sent from each wall loop, at least this many, evenly by parameter. */
const raysPerLoop = 64;
/** Two walls face each other when the angle between their normals is at least 120°. */
const facing = -0.5;

interface Ray {
  readonly at: Point;
  /** Unit normal into the compartment. */
  readonly inward: Point;
}

/**
 * Places where the compartment is narrower than `widest`: from points along every wall a ray is sent straight in, and
 * counts where it meets a wall that faces it. Gives the middle of each gap found.
 */
export function narrowGaps(domain: Domain, widest: number): Gap[] {
  const chains = [domain.outline, ...domain.holes, ...domain.innerWalls];
  const rays = chains.flatMap((chain) => wallRays(chain, widest));
  const places = new Flatbush(rays.length);
  for (const { at } of rays) places.add(at[0], at[1], at[0], at[1]);
  places.finish();
  const gaps: Gap[] = [];
  for (const ray of rays) {
    const width = firstFacing(ray, rays, places, widest);
    if (width === undefined) continue;
    gaps.push({
      at: [ray.at[0] + (ray.inward[0] * width) / 2, ray.at[1] + (ray.inward[1] * width) / 2],
      width,
    });
  }
  return gaps;
}

/** Points along a chain at most an eighth of `widest` apart; the compartment lies on the left of the way. */
function wallRays(chain: Chain, widest: number): Ray[] {
  const spacing = Math.min(widest / 8, chainLength(chain) / raysPerLoop);
  return chain.pieces.flatMap(({ curve }) => {
    const count = Math.max(1, Math.ceil(chainLength({ name: '', pieces: [{ curve, tag: 0 }] }) / spacing));
    return Array.from({ length: count }, (_, i): Ray => {
      const t = (i + 0.5) / count;
      const [dx, dy] = directionAt(curve, t);
      const speed = Math.hypot(dx, dy) || 1;
      return { at: pointAt(curve, t), inward: [-dy / speed, dx / speed] };
    });
  });
}

/** Distance along the ray to the nearest sampled wall point that faces it and that it passes close to. */
function firstFacing(ray: Ray, walls: readonly Ray[], places: Flatbush, widest: number): number | undefined {
  let nearest: number | undefined;
  const [rx, ry] = ray.at;
  for (const found of places.search(rx - widest, ry - widest, rx + widest, ry + widest)) {
    const wall = walls[found];
    if (wall === undefined) continue;
    const x = wall.at[0] - ray.at[0];
    const y = wall.at[1] - ray.at[1];
    const ahead = x * ray.inward[0] + y * ray.inward[1];
    if (!(ahead > 0 && ahead < (nearest ?? widest))) continue;
    const aside = Math.abs(x * ray.inward[1] - y * ray.inward[0]);
    const against = ray.inward[0] * wall.inward[0] + ray.inward[1] * wall.inward[1];
    if (aside < ahead && against < facing) nearest = ahead;
  }
  return nearest;
}
