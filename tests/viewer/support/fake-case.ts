import type { CaseView, LayoutView, WallView } from '../../../src/service/contract.ts';
import {
  chamberLoops,
  type Loop,
  type Mesh,
  meshChamber,
  type Point,
  type Solved,
  solveChamber,
} from './chamber.ts';

/** A case as the service would show it, over the small chamber. */

const STEP = 0.017;
const D = 1.2e-4;

interface Stretch {
  readonly loop: string;
  readonly from: number;
  readonly to: number;
  readonly kind: WallView['kind'];
  readonly kappa?: number;
}

const WALLS: Readonly<Record<string, Readonly<Record<string, Stretch>>>> = {
  'four short pads': {
    'south pad': { loop: 'outline', from: 0.36, to: 0.48, kind: 'absorbing' },
    'outer south pad': { loop: 'outline', from: 0.63, to: 0.76, kind: 'absorbing' },
    'north pad': { loop: 'outline', from: 2.25, to: 2.37, kind: 'absorbing' },
    'outer north pad': { loop: 'outline', from: 1.8, to: 1.92, kind: 'partlyAbsorbing', kappa: 2.5e-3 },
  },
  'coated posts': Object.fromEntries(
    ['inlet', 'high', 'middle', 'low', 'far'].map((name) => [
      `${name} coat`,
      { loop: `${name} post`, from: 0, to: 9, kind: 'partlyAbsorbing' as const, kappa: 2.5e-3 },
    ]),
  ),
  'one long pad': { 'long pad': { loop: 'outline', from: 0.5, to: 0.94, kind: 'absorbing' } },
};

const PINS: readonly { name: string; at: Point }[] = [
  { name: 'inlet bay', at: [0.263, 0.06] },
  { name: 'between posts', at: [0.56, 0.5] },
  { name: 'far end', at: [1.1, 0.48] },
];

const REGION: Point[] = [
  [0.14, 0.0],
  [0.39, 0.0],
  [0.39, 0.149],
  [0.14, 0.149],
  [0.14, 0.0],
];

export const FAKE_CASE: CaseView = {
  id: 'fake',
  title: 'Capture chamber 07',
  units: { length: 'mm', time: 's' },
  layouts: Object.keys(WALLS),
  reference: 'four short pads',
  starts: [
    { name: 'inlet bay', words: 'released evenly in inlet bay' },
    { name: 'anywhere', words: 'released evenly everywhere' },
    { name: 'far end', words: 'released at (1.1, 0.48) mm' },
  ],
  asked: [{ text: 'mean', start: 'inlet bay', limit: 'under 25 min' }],
  drawing: '1.20 × 0.80 mm, 5 posts, 1 region',
  diffusion: '0.00012 mm²/s',
  healed: ['repeated point on outline at (0.4, 0.15) mm'],
  taken: [],
  leftOut: [],
  notAvailable: ['standard deviation of anywhere: not available in this version'],
  warnings: [],
};

let made: { loops: Loop[]; mesh: Mesh } | undefined;
const solved = new Map<string, Solved>();

function chamber() {
  made ??= (() => {
    const loops = chamberLoops(STEP);
    return { loops, mesh: meshChamber(loops, STEP) };
  })();
  return made;
}

function solutionOf(layout: string): Solved {
  const { loops, mesh } = chamber();
  const known = solved.get(layout);
  if (known !== undefined) return known;
  const walls = Object.values(WALLS[layout] ?? {});
  const fresh = solveChamber(
    mesh,
    loops,
    (loop, s) => {
      const wall = walls.find((one) => one.loop === loop && s >= one.from - 1e-9 && s <= one.to + 1e-9);
      return wall === undefined ? undefined : wall.kind === 'absorbing' ? 'absorbing' : (wall.kappa ?? 0);
    },
    D,
  );
  solved.set(layout, fresh);
  return fresh;
}

function weightsOf(start: string): Float64Array {
  const { mesh } = chamber();
  const weights = new Float64Array(mesh.nodes.length / 2);
  for (let t = 0; t < mesh.triangles.length; t += 3) {
    const c = [0, 1, 2].map((k) => mesh.triangles[t + k] ?? 0);
    const [a, b, e] = c.map((i): Point => [mesh.nodes[2 * i] ?? 0, mesh.nodes[2 * i + 1] ?? 0]);
    if (a === undefined || b === undefined || e === undefined) continue;
    const middle = [(a[0] + b[0] + e[0]) / 3, (a[1] + b[1] + e[1]) / 3];
    const inBay = (middle[1] ?? 0) < 0.149;
    const nearEnd = Math.hypot((middle[0] ?? 0) - 1.1, (middle[1] ?? 0) - 0.48) < 0.02;
    if ((start === 'inlet bay' && !inBay) || (start === 'far end' && !nearEnd)) continue;
    const area = ((b[0] - a[0]) * (e[1] - a[1]) - (b[1] - a[1]) * (e[0] - a[0])) / 2;
    for (const i of c) weights[i] = (weights[i] ?? 0) + area / 3;
  }
  const total = weights.reduce((sum, v) => sum + v, 0);
  return weights.map((v) => v / total);
}

function wallViews(layout: string, start: string): { walls: WallView[]; shares: Record<string, number> } {
  const { loops, mesh } = chamber();
  const { caught, lengths } = solutionOf(layout);
  const share = caught(weightsOf(start));
  const named = Object.entries(WALLS[layout] ?? {});
  const shares = Object.fromEntries(named.map(([name]) => [name, 0]));
  const walls: WallView[] = [];
  loops.forEach((loop, l) => {
    const ids = mesh.loops[l] ?? [];
    const { s, total } = lengths[l] ?? { s: [], total: 0 };
    const point = (i: number): Point => {
      const id = ids[i % ids.length] ?? 0;
      return [mesh.nodes[2 * id] ?? 0, mesh.nodes[2 * id + 1] ?? 0];
    };
    const nameAt = (i: number) =>
      named.find(
        ([, w]) => w.loop === loop.name && (s[i] ?? total) >= w.from - 1e-9 && (s[i] ?? total) <= w.to + 1e-9,
      );
    let from = 0;
    const kindOf = (i: number) => {
      const [a, b] = [nameAt(i), i + 1 < ids.length ? nameAt(i + 1) : nameAt(i)];
      return a !== undefined && a === b ? a : undefined;
    };
    for (let i = 1; i <= ids.length; i++) {
      if (i < ids.length && kindOf(i)?.[0] === kindOf(i - 1)?.[0]) continue;
      const wall = kindOf(from);
      const points = Array.from({ length: i - from + 1 }, (_, k) => point(from + k));
      const density = (k: number) => {
        const a = ids[(from + k) % ids.length] ?? 0;
        const b = ids[(from + k + 1) % ids.length] ?? 0;
        const [p, q] = [point(from + k), point(from + k + 1)];
        const length = Math.hypot(q[0] - p[0], q[1] - p[1]);
        return ((share[a] ?? 0) + (share[b] ?? 0)) / (2 * length);
      };
      if (wall !== undefined) {
        for (let k = from; k < i + (points.length > 2 && i < ids.length ? 1 : 0); k++) {
          shares[wall[0]] = (shares[wall[0]] ?? 0) + (share[ids[k % ids.length] ?? 0] ?? 0);
        }
      }
      walls.push({
        loop: loop.name,
        ...(wall === undefined ? {} : { name: wall[0] }),
        kind: wall?.[1].kind ?? 'reflecting',
        ...(wall?.[1].kappa === undefined ? {} : { kappa: '2.5 µm/s' }),
        from: s[from] ?? 0,
        to: i < ids.length ? (s[i] ?? 0) : total,
        points,
        ...(wall === undefined ? {} : { flux: points.slice(1).map((_, k) => density(k)) }),
      });
      from = i;
    }
  });
  return { walls, shares };
}

/** The layout as solved, flux for one start. */
export function fakeLayout(layout: string, start: string): LayoutView {
  const { loops, mesh } = chamber();
  const { values, lengths } = solutionOf(layout);
  const longest = values.reduce((best, v, i) => (v > (values[best] ?? 0) ? i : best), 0);
  const nearest = ([x, y]: Point) => {
    let best = 0;
    const away = (i: number) => Math.hypot((mesh.nodes[2 * i] ?? 0) - x, (mesh.nodes[2 * i + 1] ?? 0) - y);
    for (let i = 1; i < values.length; i++) if (away(i) < away(best)) best = i;
    return values[best] ?? 0;
  };
  const figure = (value: number) => ({ value, kind: 'estimate' });
  const answers = FAKE_CASE.starts.map(({ name }) => {
    const weights = weightsOf(name);
    const mean = values.reduce((sum, v, i) => sum + v * (weights[i] ?? 0), 0);
    const { shares } = wallViews(layout, name);
    return {
      start: name,
      mean: figure(mean),
      shares: Object.fromEntries(Object.entries(shares).map(([wall, value]) => [wall, figure(value)])),
      pins: Object.fromEntries(PINS.map((pin) => [pin.name, { mean: figure(nearest(pin.at)) }])),
      asked:
        name === 'inlet bay'
          ? [{ figure: 'mean', value: mean, under: 1500, verdict: mean < 1500 ? 'meets' : 'misses' }]
          : [],
      mesh: { nodes: values.length, triangles: mesh.triangles.length / 3, minAngle: 21.4 },
      numbers: { roundingFloor: 3e-12 },
      warnings: [],
      cautions: ['The figures come from one mesh: no bracket stands behind them yet.'],
    };
  });
  return {
    caseId: 'fake',
    layout,
    start,
    answers,
    loops: loops.map((loop, l) => {
      const a: Point = loop.points[0] ?? [0, 0];
      const b: Point = loop.points[1] ?? [0, 0];
      const size = Math.hypot(b[0] - a[0], b[1] - a[1]);
      return {
        name: loop.name,
        role: loop.role,
        length: lengths[l]?.total ?? 0,
        mark: [...a] as Point,
        outward: [(b[1] - a[1]) / size, -(b[0] - a[0]) / size] as Point,
      };
    }),
    walls: wallViews(layout, start).walls,
    regions: [{ name: 'inlet bay', lines: [REGION] }],
    starts: [
      { name: 'inlet bay', region: 'inlet bay' },
      { name: 'anywhere' },
      { name: 'far end', at: [1.1, 0.48] },
    ],
    pins: PINS.map((pin) => ({ name: pin.name, at: [...pin.at] as Point })),
    bounds: { low: [0, 0], high: [1.2, 0.8] },
    longest: {
      value: values[longest] ?? 0,
      at: [mesh.nodes[2 * longest] ?? 0, mesh.nodes[2 * longest + 1] ?? 0],
    },
  };
}

/** The field in the form of the service. */
export function fakeField(layout: string): Uint8Array {
  const { mesh } = chamber();
  const { values } = solutionOf(layout);
  const header = Buffer.alloc(16);
  header.write('TRY1', 'latin1');
  header.writeUInt32LE(values.length, 4);
  header.writeUInt32LE(mesh.triangles.length / 3, 8);
  const bytes = (array: Float64Array | Int32Array) =>
    Buffer.from(array.buffer, array.byteOffset, array.byteLength);
  return Buffer.concat([header, bytes(mesh.nodes), bytes(values), bytes(mesh.triangles)]);
}
