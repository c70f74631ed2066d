import { Cavity } from './cavity.ts';
import { fillCavity, makeFan } from './fan.ts';
import { type HalfEdgeMesh, next, previous } from './half-edge.ts';
import { VertexMover } from './move-vertex.ts';

/**
 * Works on the triangles that refinement had to leave below the goal, until they reach it or nothing helps.
 *
 * They lie where both sides of a wall near a sharp corner are meshed: halving the wall there would go on for ever.
 * Moving a free corner is mostly enough; else a point is put in and its surroundings are moved again.
 *
 * @param minAngle in degrees
 * @param mayInsert whether points may be put in where moving does not help
 * @returns the triangles still below the goal
 */
export function mendAngles(mesh: HalfEdgeMesh, minAngle: number, mayInsert: boolean): number[] {
  const goal = 1 / Math.tan((minAngle * Math.PI) / 180);
  let bad = listBelow(mesh, goal);
  if (bad.length === 0) return bad;
  const mender = new Mender(mesh, goal);
  let insertions = mayInsert ? 20 + 6 * bad.length : 0;
  for (let sweep = 0; sweep < 40 && bad.length > 0; sweep++) {
    let changed = false;
    for (const t of bad) if (isBelow(mesh, t, goal)) changed = mender.move(t) || changed;
    for (const t of bad) {
      if (changed || insertions === 0) break;
      if (!isBelow(mesh, t, goal) || !mender.insert(t)) continue;
      changed = true;
      insertions--;
    }
    if (!changed) return bad;
    bad = listBelow(mesh, goal);
  }
  return bad;
}

function listBelow(mesh: HalfEdgeMesh, goal: number): number[] {
  const found: number[] = [];
  for (let t = 0; t < mesh.triangleCount; t++) if (isBelow(mesh, t, goal)) found.push(t);
  return found;
}

/** Has an angle with a cotangent above the goal that is not a corner between two segments. */
function isBelow(mesh: HalfEdgeMesh, t: number, goal: number): boolean {
  const { xy, from, segment } = mesh;
  for (let e = 3 * t; e < 3 * t + 3; e++) {
    const back = e === 3 * t ? e + 2 : e - 1;
    const a = 2 * from[e];
    const b = 2 * from[e === 3 * t + 2 ? 3 * t : e + 1];
    const c = 2 * from[back];
    const ux = xy[b] - xy[a];
    const uy = xy[b + 1] - xy[a + 1];
    const wx = xy[c] - xy[a];
    const wy = xy[c + 1] - xy[a + 1];
    if (ux * wx + uy * wy <= goal * (ux * wy - uy * wx)) continue;
    if (segment[e] < 0 || segment[back] < 0) return true;
  }
  return false;
}

const directions = [0, 1, 2, 3, 4, 5, 6, 7].map(
  (i) => [Math.cos((i * Math.PI) / 4), Math.sin((i * Math.PI) / 4)] as const,
);

class Mender {
  readonly #mesh: HalfEdgeMesh;
  readonly #goal: number;
  readonly #mover: VertexMover;
  readonly #cavity = new Cavity();
  readonly #fan = makeFan();
  /** Segments are not split here, so nobody reads it. */
  readonly #segmentEdge: Int32Array;

  constructor(mesh: HalfEdgeMesh, goal: number) {
    this.#mesh = mesh;
    this.#goal = goal;
    this.#mover = new VertexMover(mesh);
    this.#segmentEdge = new Int32Array(mesh.segmentCount);
  }

  /** Moves the corners of the triangle and of its neighbours to better places. */
  move(t: number): boolean {
    const { from, opposite } = this.#mesh;
    const corners = new Set<number>();
    for (let e = 3 * t; e < 3 * t + 3; e++) {
      corners.add(from[e]);
      if (opposite[e] >= 0) corners.add(from[previous(opposite[e])]);
    }
    let moved = false;
    for (const v of corners) moved = this.#improve(v) || moved;
    return moved;
  }

  /** Pattern search for the place with the largest smallest angle round `v` (Hooke & Jeeves 1961). */
  #improve(v: number): boolean {
    const mover = this.#mover;
    if (!mover.pick(v)) return false;
    let x = this.#mesh.xy[2 * v];
    let y = this.#mesh.xy[2 * v + 1];
    const first = mover.worst(x, y);
    let best = first;
    let step = mover.reach(v) / 4;
    for (let i = 0; i < 24; i++) {
      let toX = x;
      let toY = y;
      for (const [dx, dy] of directions) {
        const worst = mover.worst(x + step * dx, y + step * dy);
        if (worst >= best) continue;
        best = worst;
        toX = x + step * dx;
        toY = y + step * dy;
      }
      if (toX === x && toY === y) step /= 2;
      x = toX;
      y = toY;
    }
    // Once all its angles reach the goal a vertex stays, else neighbours would push each other for ever.
    return first > this.#goal && best < first - 1e-3 && mover.move(v, x, y);
  }

  /** Puts a point over the shortest edge, as far from it as segments allow, and moves what is round it. */
  insert(t: number): boolean {
    const mesh = this.#mesh;
    const { xy, from } = mesh;
    let e = 3 * t;
    for (const f of [3 * t + 1, 3 * t + 2]) if (this.#square(f) < this.#square(e)) e = f;
    const p = 2 * from[e];
    const q = 2 * from[next(e)];
    const dx = xy[q] - xy[p];
    const dy = xy[q + 1] - xy[p + 1];
    for (const height of [1.5, 1.2, 1, 0.8, 0.65, 0.5]) {
      const x = xy[p] + 0.5 * dx - height * dy;
      const y = xy[p + 1] + 0.5 * dy + height * dx;
      const hit: number[] = [];
      this.#cavity.collect(mesh, t, x, y);
      if (!this.#cavity.look(mesh, x, y, hit) || hit.length > 0) continue;
      const v = mesh.addVertex(x, y);
      fillCavity(mesh, this.#cavity, v, true, mesh.regionSet[t], this.#segmentEdge, this.#fan);
      this.#mover.noteTriangles(this.#fan.list, this.#fan.count);
      this.#improve(v);
      return true;
    }
    return false;
  }

  #square(e: number): number {
    const { xy, from } = this.#mesh;
    const a = 2 * from[e];
    const b = 2 * from[next(e)];
    return (xy[a] - xy[b]) ** 2 + (xy[a + 1] - xy[b + 1]) ** 2;
  }
}
