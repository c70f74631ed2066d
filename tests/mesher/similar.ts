import {
  type Chain,
  type Curve,
  checkMesh,
  type Domain,
  enclosedArea,
  healDomain,
  MesherError,
  meshDomain,
  type Point,
} from '../../mesher/index.ts';
import { randomDrawing } from './random-drawing.ts';

/** The same drawing turned by `angle` (radians) about the origin, moved by `by` (in old lengths), scaled by `scale`. */
export function similar(domain: Domain, angle: number, by: Point, scale: number): Domain {
  const c = Math.cos(angle);
  const s = Math.sin(angle);
  const place = ([x, y]: Point): Point => [scale * (c * x - s * y + by[0]), scale * (s * x + c * y + by[1])];
  const curve = (old: Curve): Curve => {
    const from = place(old.from);
    const to = place(old.to);
    switch (old.kind) {
      case 'line':
        return { kind: 'line', from, to };
      case 'arc': {
        const radii: [number, number] = [scale * old.radii[0], scale * old.radii[1]];
        return { ...old, from, to, centre: place(old.centre), radii, turned: old.turned + angle };
      }
      case 'cubic':
        return { kind: 'cubic', from, to, controls: [place(old.controls[0]), place(old.controls[1])] };
    }
  };
  const chain = (old: Chain): Chain => ({
    name: old.name,
    pieces: old.pieces.map((piece) => ({ curve: curve(piece.curve), tag: piece.tag })),
  });
  return {
    outline: chain(domain.outline),
    holes: domain.holes.map(chain),
    innerWalls: domain.innerWalls.map(chain),
    regions: domain.regions.map(chain),
    tolerance: scale * domain.tolerance,
  };
}

/** What came out differently for the same drawings turned, moved and scaled. */
export interface SimilarFindings {
  /** Another verdict, another healing, or a mesh with a broken promise. */
  readonly faults: string[];
  /** Triangle counts that differ by more than 2 %. */
  readonly beyond: string[];
  readonly compared: number;
}

/** Angle, shift and scale of each copy that is compared. */
const copies = [
  [0.7, [3, -5], 1e9],
  [Math.PI / 2, [0.1, 0.2], 1e-9],
  [2.1, [0, 0], 1],
  [0, [0, 0], 1e-9],
] as const;

/**
 * Meshes random drawings and similar ones with about 5000 triangles each: rounding settles ties between equally good
 * points another way, and with fewer triangles a single one of those counts for per cents.
 */
export function compareSimilar(from: number, to: number): SimilarFindings {
  const faults: string[] = [];
  const beyond: string[] = [];
  let compared = 0;
  for (let seed = from; seed <= to; seed++) {
    const { domain, summary } = randomDrawing(seed);
    const area = Math.abs(enclosedArea(domain.outline));
    const size = Math.sqrt(area / 1000);
    const own = outcome(domain, size);
    for (const [angle, by, scale] of copies) {
      const other = outcome(similar(domain, angle, by, scale), scale * size);
      const name = `${summary}, turned ${angle}, scaled ${scale}`;
      compared++;
      if (own.verdict !== other.verdict) faults.push(`${name}: ${own.verdict} is now ${other.verdict}`);
      else if (Math.abs(other.triangles / own.triangles - 1) > 0.02) {
        beyond.push(`${name}: ${own.triangles} triangles are now ${other.triangles}`);
      }
    }
  }
  return { faults, beyond, compared };
}

function outcome(domain: Domain, maxSize: number): { verdict: string; triangles: number } {
  try {
    const { domain: sound, healed } = healDomain(domain);
    const mesh = meshDomain(sound, { maxSize });
    const verdict = [...healed.map((h) => `${h.what} ${h.loop}`), ...checkMesh(mesh, sound)].join(', ');
    return { verdict, triangles: mesh.triangles.length / 3 };
  } catch (error) {
    return { verdict: error instanceof MesherError ? error.code : String(error), triangles: 0 };
  }
}
