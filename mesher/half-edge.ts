import type { Curve } from './domain.ts';

/**
 * A triangulation as half-edges in flat arrays that grow by doubling.
 *
 * Half-edge 3t + i runs from corner i of triangle t to the next, counter-clockwise. Edges that have to stay carry the
 * number of a segment, a part of a wall or region border from curve parameter t0 to t1.
 */
export class HalfEdgeMesh {
  vertexCount = 0;
  triangleCount = 0;
  segmentCount = 0;
  /** 2 per vertex: x, y. */
  xy = new Float64Array(64);
  /** Per half-edge: the vertex it starts from. */
  from = new Int32Array(192);
  /** Per half-edge: the one on the other side, −1 at the rim. */
  opposite = new Int32Array(192);
  /** Per half-edge: segment it lies on, −1 for a free edge. */
  segment = new Int32Array(192);
  /** Per triangle: index of its set of regions. */
  regionSet = new Int32Array(64);
  /** Per segment: index into `curves`. */
  segmentCurve = new Int32Array(64);
  /** 2 per segment: curve parameters of its start and end. */
  segmentSpan = new Float64Array(128);
  /** Per segment: the vertex at the start of its span. */
  segmentFrom = new Int32Array(64);
  /** Per segment: the vertex at the end of its span. */
  segmentTo = new Int32Array(64);
  /** The curves segments lie on, with the tag of a wall or −1 for a border between regions. */
  readonly curves: readonly Curve[];
  readonly tags: Int32Array;

  constructor(curves: readonly Curve[], tags: Int32Array) {
    this.curves = curves;
    this.tags = tags;
  }

  reserve(vertices: number, triangles: number, segments: number): void {
    if (2 * vertices > this.xy.length) this.xy = grownFloat(this.xy, 2 * vertices);
    if (triangles > this.regionSet.length) {
      this.from = grownInt(this.from, 3 * triangles);
      this.opposite = grownInt(this.opposite, 3 * triangles);
      this.segment = grownInt(this.segment, 3 * triangles);
      this.regionSet = grownInt(this.regionSet, triangles);
    }
    if (segments > this.segmentCurve.length) {
      this.segmentCurve = grownInt(this.segmentCurve, segments);
      this.segmentSpan = grownFloat(this.segmentSpan, 2 * segments);
      this.segmentFrom = grownInt(this.segmentFrom, segments);
      this.segmentTo = grownInt(this.segmentTo, segments);
    }
  }

  /** The same triangulation in arrays of its own, without spare room. */
  copy(): HalfEdgeMesh {
    const mesh = new HalfEdgeMesh(this.curves, this.tags);
    mesh.vertexCount = this.vertexCount;
    mesh.triangleCount = this.triangleCount;
    mesh.segmentCount = this.segmentCount;
    mesh.xy = this.xy.slice(0, 2 * this.vertexCount);
    mesh.from = this.from.slice(0, 3 * this.triangleCount);
    mesh.opposite = this.opposite.slice(0, 3 * this.triangleCount);
    mesh.segment = this.segment.slice(0, 3 * this.triangleCount);
    mesh.regionSet = this.regionSet.slice(0, this.triangleCount);
    mesh.segmentCurve = this.segmentCurve.slice(0, this.segmentCount);
    mesh.segmentSpan = this.segmentSpan.slice(0, 2 * this.segmentCount);
    mesh.segmentFrom = this.segmentFrom.slice(0, this.segmentCount);
    mesh.segmentTo = this.segmentTo.slice(0, this.segmentCount);
    return mesh;
  }

  addVertex(x: number, y: number): number {
    const v = this.vertexCount;
    this.reserve(v + 1, 0, 0);
    this.xy[2 * v] = x;
    this.xy[2 * v + 1] = y;
    this.vertexCount = v + 1;
    return v;
  }

  addSegment(curve: number, t0: number, t1: number, from: number, to: number): number {
    const s = this.segmentCount;
    this.reserve(0, 0, s + 1);
    this.segmentCurve[s] = curve;
    this.segmentSpan[2 * s] = t0;
    this.segmentSpan[2 * s + 1] = t1;
    this.segmentFrom[s] = from;
    this.segmentTo[s] = to;
    this.segmentCount = s + 1;
    return s;
  }
}

export function grownInt(old: Int32Array<ArrayBuffer>, least: number): Int32Array<ArrayBuffer> {
  const out = new Int32Array(Math.max(least, 2 * old.length));
  out.set(old);
  return out;
}

export function grownFloat(old: Float64Array<ArrayBuffer>, least: number): Float64Array<ArrayBuffer> {
  const out = new Float64Array(Math.max(least, 2 * old.length));
  out.set(old);
  return out;
}

export function next(e: number): number {
  return e % 3 === 2 ? e - 2 : e + 1;
}

export function previous(e: number): number {
  return e % 3 === 0 ? e + 2 : e - 1;
}

/** Fills `opposite` for triangles 0..triangleCount−1 from shared ends; −1 where no partner is found. */
export function pairHalfEdges(mesh: HalfEdgeMesh): void {
  const open = new Map<number, number>();
  const count = 3 * mesh.triangleCount;
  const n = mesh.vertexCount;
  for (let e = 0; e < count; e++) {
    const a = mesh.from[e];
    const b = mesh.from[next(e)];
    const partner = open.get(b * n + a);
    if (partner === undefined) {
      open.set(a * n + b, e);
      mesh.opposite[e] = -1;
    } else {
      open.delete(b * n + a);
      mesh.opposite[e] = partner;
      mesh.opposite[partner] = e;
    }
  }
}
