import { directionAt } from './curves.ts';
import { type HalfEdgeMesh, next, previous } from './half-edge.ts';

/** Corners below this get power-of-two shells: two walls that meet at 60° or more settle by halving alone. */
const shellAngle = (60.5 * Math.PI) / 180;

/** A corner of the compartment between two segments. */
export interface SharpCorner {
  readonly vertex: number;
  /** Radians; the smaller of the angle between the chords and between the curves: 0 where curves touch. */
  readonly angle: number;
  /** Radians, between the first chords. */
  readonly chordAngle: number;
  /** Shortest segment that ends at the vertex, in the length unit. */
  readonly reach: number;
}

/**
 * Every corner sharper than about 60° between neighbouring segments of the first triangulation.
 *
 * Two walls that meet at such an angle would make each other be split for ever when halved; split at the same
 * distances from the corner they do not (concentric shells: Ruppert 1995, section 6).
 */
export function findSharpCorners(mesh: HalfEdgeMesh): SharpCorner[] {
  const reach = new Map<number, number>();
  for (let s = 0; s < mesh.segmentCount; s++) {
    const length = segmentLength(mesh, s);
    for (const v of [mesh.segmentFrom[s], mesh.segmentTo[s]]) {
      reach.set(v, Math.min(reach.get(v) ?? Number.POSITIVE_INFINITY, length));
    }
  }
  const found: SharpCorner[] = [];
  for (let e = 0; e < 3 * mesh.triangleCount; e++) {
    if (mesh.segment[e] < 0) continue;
    const { angle, chordAngle } = sector(mesh, e);
    if (angle < shellAngle) {
      const vertex = mesh.from[e];
      found.push({ vertex, angle, chordAngle, reach: reach.get(vertex) ?? 0 });
    }
  }
  return found;
}

function segmentLength(mesh: HalfEdgeMesh, s: number): number {
  const a = 2 * mesh.segmentFrom[s];
  const b = 2 * mesh.segmentTo[s];
  return Math.hypot(mesh.xy[a] - mesh.xy[b], mesh.xy[a + 1] - mesh.xy[b + 1]);
}

/** Angles at the start of segment half-edge `e` counter-clockwise to the next segment there. */
function sector(mesh: HalfEdgeMesh, e: number): { angle: number; chordAngle: number } {
  let chordAngle = 0;
  let at = e;
  for (;;) {
    chordAngle += angleAt(mesh, at);
    const back = previous(at);
    if (mesh.segment[back] >= 0) {
      return { angle: Math.min(chordAngle, tangentAngle(mesh, e, back, chordAngle)), chordAngle };
    }
    at = mesh.opposite[back];
    if (at < 0 || at === e || chordAngle > Math.PI) return { angle: chordAngle, chordAngle };
  }
}

function angleAt(mesh: HalfEdgeMesh, e: number): number {
  const { xy, from } = mesh;
  const v = 2 * from[e];
  const b = 2 * from[next(e)];
  const c = 2 * from[previous(e)];
  const ux = xy[b] - xy[v];
  const uy = xy[b + 1] - xy[v + 1];
  const wx = xy[c] - xy[v];
  const wy = xy[c + 1] - xy[v + 1];
  return Math.atan2(ux * wy - uy * wx, ux * wx + uy * wy);
}

/** Angle between the curves themselves; `chords` if they are both straight there. */
function tangentAngle(mesh: HalfEdgeMesh, e: number, back: number, chords: number): number {
  const s = mesh.segment[e];
  const r = mesh.segment[back];
  const curved = (i: number): boolean => mesh.curves[mesh.segmentCurve[i]].kind !== 'line';
  if (chords > Math.PI / 2 || (!curved(s) && !curved(r))) return chords;
  const v = mesh.from[e];
  const u = outgoing(mesh, s, v);
  const w = outgoing(mesh, r, v);
  const angle = Math.atan2(u[0] * w[1] - u[1] * w[0], u[0] * w[0] + u[1] * w[1]);
  return Math.max(0, angle);
}

function outgoing(mesh: HalfEdgeMesh, s: number, v: number): readonly [number, number] {
  const curve = mesh.curves[mesh.segmentCurve[s]];
  const starts = mesh.segmentFrom[s] === v;
  const d = directionAt(curve, mesh.segmentSpan[2 * s + (starts ? 0 : 1)]);
  return starts ? [d[0], d[1]] : [-d[0], -d[1]];
}
