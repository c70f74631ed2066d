import type { Mesh } from '../../mesher/index.ts';

/** What a structured rectangle mesh is like. */
export interface RectangleOptions {
  readonly x: readonly [number, number];
  readonly y: readonly [number, number];
  readonly columns: number;
  readonly rows: number;
  /** Index into `regionSets` per cell, by its middle; default 0. */
  readonly region?: (x: number, y: number) => number;
  readonly regionSets?: readonly (readonly number[])[];
  /** Tag per wall segment by its middle; default 0 bottom, 1 right, 2 top, 3 left. */
  readonly tag?: (x: number, y: number) => number;
}

/** A rectangle of equal cells, each split into two right triangles. */
export function rectangleMesh(options: RectangleOptions): Mesh {
  const { columns, rows } = options;
  const [x0, x1] = options.x;
  const [y0, y1] = options.y;
  const nodes = new Float64Array(2 * (columns + 1) * (rows + 1));
  const at = (i: number, j: number): number => j * (columns + 1) + i;
  for (let j = 0; j <= rows; j++) {
    for (let i = 0; i <= columns; i++) {
      nodes[2 * at(i, j)] = x0 + ((x1 - x0) * i) / columns;
      nodes[2 * at(i, j) + 1] = y0 + ((y1 - y0) * j) / rows;
    }
  }
  const triangles: number[] = [];
  const regionSet: number[] = [];
  for (let j = 0; j < rows; j++) {
    for (let i = 0; i < columns; i++) {
      triangles.push(at(i, j), at(i + 1, j), at(i + 1, j + 1), at(i, j), at(i + 1, j + 1), at(i, j + 1));
      const middleX = x0 + ((x1 - x0) * (i + 0.5)) / columns;
      const middleY = y0 + ((y1 - y0) * (j + 0.5)) / rows;
      const region = options.region?.(middleX, middleY) ?? 0;
      regionSet.push(region, region);
    }
  }
  const walls: Walls = { segments: [], tags: [] };
  for (let i = 0; i < columns; i++) addWall(walls, at(i, 0), at(i + 1, 0), 0);
  for (let j = 0; j < rows; j++) addWall(walls, at(columns, j), at(columns, j + 1), 1);
  for (let i = columns; i > 0; i--) addWall(walls, at(i, rows), at(i - 1, rows), 2);
  for (let j = rows; j > 0; j--) addWall(walls, at(0, j), at(0, j - 1), 3);
  return meshOf(nodes, triangles, regionSet, walls, options);
}

/** What a mesh of rings about the origin is like. */
export interface DiscOptions {
  readonly radius: number;
  readonly rings: number;
  readonly region?: (x: number, y: number) => number;
  readonly regionSets?: readonly (readonly number[])[];
  /** Tag per rim segment by its middle; default 0. */
  readonly tag?: (x: number, y: number) => number;
}

/** A disc: one node in the middle, ring r with 6 r nodes, Delaunay to rounding. */
export function discMesh(options: DiscOptions): Mesh {
  const { rings, radius } = options;
  const firstOf = (ring: number): number => (ring === 0 ? 0 : 1 + 3 * ring * (ring - 1));
  const nodes = new Float64Array(2 * firstOf(rings + 1));
  for (let ring = 1; ring <= rings; ring++) {
    for (let q = 0; q < 6 * ring; q++) {
      const angle = (Math.PI * q) / (3 * ring);
      nodes[2 * (firstOf(ring) + q)] = ((radius * ring) / rings) * Math.cos(angle);
      nodes[2 * (firstOf(ring) + q) + 1] = ((radius * ring) / rings) * Math.sin(angle);
    }
  }
  const triangles: number[] = [];
  for (let ring = 1; ring <= rings; ring++) {
    const outer = (q: number): number => firstOf(ring) + (q % (6 * ring));
    const inner = (q: number): number => (ring === 1 ? 0 : firstOf(ring - 1) + (q % (6 * (ring - 1))));
    for (let sector = 0; sector < 6; sector++) {
      for (let q = 0; q < ring; q++) {
        triangles.push(
          inner(sector * (ring - 1) + q),
          outer(sector * ring + q),
          outer(sector * ring + q + 1),
        );
        if (q === ring - 1) continue;
        const i = sector * (ring - 1) + q;
        triangles.push(inner(i), outer(sector * ring + q + 1), inner(i + 1));
      }
    }
  }
  const regionSet: number[] = [];
  for (let t = 0; t < triangles.length; t += 3) {
    let x = 0;
    let y = 0;
    for (let v = 0; v < 3; v++) {
      x += (nodes[2 * (triangles[t + v] ?? 0)] ?? 0) / 3;
      y += (nodes[2 * (triangles[t + v] ?? 0) + 1] ?? 0) / 3;
    }
    regionSet.push(options.region?.(x, y) ?? 0);
  }
  const walls: Walls = { segments: [], tags: [] };
  const rim = firstOf(rings);
  for (let q = 0; q < 6 * rings; q++) addWall(walls, rim + q, rim + ((q + 1) % (6 * rings)), 0);
  return meshOf(nodes, triangles, regionSet, walls, options);
}

interface Walls {
  readonly segments: number[];
  readonly tags: number[];
}

function addWall(walls: Walls, from: number, to: number, tag: number): void {
  walls.segments.push(from, to);
  walls.tags.push(tag);
}

function meshOf(
  nodes: Float64Array,
  triangles: readonly number[],
  regionSet: readonly number[],
  walls: Walls,
  options: Pick<RectangleOptions, 'tag' | 'regionSets'>,
): Mesh {
  const count = walls.tags.length;
  const x = (node: number | undefined): number => nodes[2 * (node ?? 0)] ?? 0;
  const y = (node: number | undefined): number => nodes[2 * (node ?? 0) + 1] ?? 0;
  const tags = walls.tags.map((tag, s) => {
    const a = walls.segments[2 * s];
    const b = walls.segments[2 * s + 1];
    return options.tag?.((x(a) + x(b)) / 2, (y(a) + y(b)) / 2) ?? tag;
  });
  return {
    nodes,
    triangles: Int32Array.from(triangles),
    regionSet: Int32Array.from(regionSet),
    regionSets: options.regionSets ?? [[]],
    segments: Int32Array.from(walls.segments),
    segmentTag: Int32Array.from(tags),
    segmentSpan: Float64Array.from({ length: 2 * count }, (_, q) => q % 2),
    segmentTwin: new Int32Array(count).fill(-1),
    chordError: 0,
  };
}
