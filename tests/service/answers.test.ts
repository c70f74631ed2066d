import { afterAll, beforeAll, expect, it } from 'vitest';
import type { Answers } from '../../src/run/answers.ts';
import type { CaseView, JobView, LayoutView } from '../../src/service/contract.ts';
import { room, served } from './served.ts';

const { service, ask, json, errorOf, open, ended, solve } = served();
let theCase: CaseView;
let both: LayoutView;
let coat: LayoutView;
beforeAll(async () => {
  theCase = await open(room);
  both = await solve(theCase.id, 'both pads');
  coat = await solve(theCase.id, 'left and coat');
});
afterAll(() => service.close());

const at = (layout: string, rest = '') =>
  `/api/cases/${theCase.id}/layouts/${encodeURIComponent(layout)}${rest}`;

/** The binary field, read as its description says and not with our own reader. */
const fieldOf = async (layout: string) => {
  const { bytes, headers } = await ask('GET', at(layout, '/field'));
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  const n = view.getUint32(4, true);
  const t = view.getUint32(8, true);
  const float = (i: number) => view.getFloat64(16 + 8 * i, true);
  return {
    magic: bytes.subarray(0, 4).toString('latin1'),
    reserved: view.getUint32(12, true),
    length: bytes.length,
    n,
    t,
    x: (i: number) => float(2 * i),
    y: (i: number) => float(2 * i + 1),
    time: (i: number) => float(2 * n + i),
    corner: (triangle: number, c: number) => view.getInt32(16 + 24 * n + 4 * (3 * triangle + c), true),
    etag: String(headers['etag']),
  };
};
type Field = Awaited<ReturnType<typeof fieldOf>>;

const doubleArea = (f: Field, a: number, b: number, x: number, y: number) =>
  (f.x(b) - f.x(a)) * (y - f.y(a)) - (f.y(b) - f.y(a)) * (x - f.x(a));

const answersOf = (view: LayoutView) => view.answers as Answers[];

it('says what a case holds before anything is solved', () => {
  expect(theCase).toMatchObject({
    title: 'Room with two pads',
    units: { length: 'mm', time: 's' },
    layouts: ['both pads', 'left and coat', 'no way out'],
    drawing: '2.00 × 1.00 mm, 2 posts',
    diffusion: '0.001 mm²/s',
    starts: [
      { name: 'anywhere', words: 'released evenly everywhere' },
      { name: 'middle', words: 'released at (1, 0.5) mm' },
    ],
  });
  expect(theCase.id).toMatch(/^[0-9a-f]{64}$/);
});

it('keeps a case under its hash, whoever sends it', async () => {
  expect((await open(room)).id).toBe(theCase.id);
  expect(await json('GET', `/api/cases/${theCase.id}`)).toEqual(theCase);
  expect((await open({ ...room, particle: { diffusion: '2e-3 mm^2/s' } })).id).not.toBe(theCase.id);
});

it('gives one answer per start for each layout, and tells the layouts apart', () => {
  for (const [view, layout] of [
    [both, 'both pads'],
    [coat, 'left and coat'],
  ] as const) {
    expect(view.layout).toBe(layout);
    expect(answersOf(view).map(({ start, layout: name }) => [start, name])).toEqual([
      ['anywhere', layout],
      ['middle', layout],
    ]);
  }
  // Taking a pad away and giving a weak coat instead lengthens this case's mean time.
  expect(answersOf(coat)[0]?.mean.value).toBeGreaterThan(answersOf(both)[0]?.mean.value ?? 0);
});

it('gives a field whose own mean over the area is the answer for a start everywhere', async () => {
  const f = await fieldOf('both pads');
  expect([f.magic, f.reserved, f.length]).toEqual(['TRY1', 0, 16 + 24 * f.n + 12 * f.t]);
  let area = 0;
  let sum = 0;
  for (let k = 0; k < f.t; k++) {
    const [a, b, c] = [f.corner(k, 0), f.corner(k, 1), f.corner(k, 2)];
    const part = doubleArea(f, a, b, f.x(c), f.y(c)) / 2;
    expect(part).toBeGreaterThan(0);
    area += part;
    sum += (part * (f.time(a) + f.time(b) + f.time(c))) / 3;
  }
  const mean = answersOf(both)[0]?.mean.value ?? 0;
  expect(Math.abs(sum / area / mean - 1)).toBeLessThan(1e-10); // sums of about 1e4 terms in another order
  expect([f.n, f.t]).toEqual([answersOf(both)[0]?.mesh.nodes, answersOf(both)[0]?.mesh.triangles]);
});

it('gives a field whose value at a pin is the answer there', async () => {
  const f = await fieldOf('left and coat');
  const [x, y] = [0.1, 0.9];
  let found = Number.NaN;
  for (let k = 0; k < f.t; k++) {
    const [a, b, c] = [f.corner(k, 0), f.corner(k, 1), f.corner(k, 2)];
    const parts = [doubleArea(f, b, c, x, y), doubleArea(f, c, a, x, y), doubleArea(f, a, b, x, y)] as const;
    if (Math.min(...parts) < 0) continue;
    const whole = parts[0] + parts[1] + parts[2];
    found = (parts[0] * f.time(a) + parts[1] * f.time(b) + parts[2] * f.time(c)) / whole;
  }
  const pin = answersOf(coat)[0]?.pins['corner']?.mean.value ?? 0;
  expect(Math.abs(found / pin - 1)).toBeLessThan(1e-10);
});

it('says where the mean exit time is longest, as the field has it', async () => {
  const f = await fieldOf('both pads');
  let most = 0;
  for (let i = 1; i < f.n; i++) if (f.time(i) > f.time(most)) most = i;
  expect(both.longest).toEqual({ value: f.time(most), at: [f.x(most), f.y(most)] });
  expect(both.bounds).toEqual({ low: [0, 0], high: [2, 1] });
});

it('draws every wall once, with shares caught per length that add up to the shares', () => {
  for (const view of [both, coat]) {
    const shares: Answers['shares'] = answersOf(view)[0]?.shares ?? {};
    const caught = new Map<string, number>();
    let length = 0;
    for (const { points, flux, name = '' } of view.walls) {
      for (let i = 0; i + 1 < points.length; i++) {
        const [[x0, y0] = [0, 0], [x1, y1] = [0, 0]] = [points[i], points[i + 1]];
        const chord = Math.hypot(x1 - x0, y1 - y0);
        length += chord;
        if (flux) caught.set(name, (caught.get(name) ?? 0) + chord * (flux[i] ?? 0));
      }
      if (flux) expect(flux).toHaveLength(points.length - 1);
    }
    expect([...caught.keys()].sort()).toEqual(Object.keys(shares).sort());
    for (const [name, share] of Object.entries(shares)) {
      expect(Math.abs((caught.get(name) ?? 0) - share.value), name).toBeLessThan(1e-8);
    }
    // Outline 6, circles 2π·0.1 each; chords of a fine polygon are shorter by less than 1 %.
    const whole = 6 + 2 * 2 * Math.PI * 0.1;
    expect(length / whole).toBeGreaterThan(0.99);
    expect(length / whole).toBeLessThan(1 + 1e-12);
  }
});

it('draws the flux for the start asked for, else for the first', async () => {
  const middle = await json<LayoutView>('GET', at('both pads', '?start=middle'));
  expect([both.start, middle.start]).toEqual(['anywhere', 'middle']);
  const fluxes = (view: LayoutView) => view.walls.map(({ flux }) => flux);
  expect(fluxes(middle)).not.toEqual(fluxes(both));
  expect(fluxes(await json<LayoutView>('GET', at('both pads', '?start=anywhere')))).toEqual(fluxes(both));
  expect((await errorOf('GET', at('both pads', '?start=nowhere'))).code).toBe('UNKNOWN_START');
});

it('names the loops with their length, mark and the way out of the compartment there', () => {
  const [outline, post] = both.loops;
  expect(outline).toMatchObject({ name: 'outline', role: 'outline', mark: [0, 0] });
  expect(outline?.length).toBeCloseTo(6, 12);
  expect(outline?.outward[0]).toBeCloseTo(0, 12);
  expect(outline?.outward[1]).toBeCloseTo(-1, 12);
  expect(post).toMatchObject({ name: 'post 1', role: 'hole' });
  expect(post?.length).toBeCloseTo(2 * Math.PI * 0.1, 10);
  // The mark of a circle is its +x point; out of the compartment there is into the post.
  expect(post?.mark[0]).toBeCloseTo(0.7, 12);
  expect(post?.outward[0]).toBeCloseTo(-1, 10);
});

it('answers a field that is known with 304, and gives each layout a tag of its own', async () => {
  const { etag } = await fieldOf('both pads');
  expect(etag).not.toBe((await fieldOf('left and coat')).etag);
  const get = (known: string) =>
    service.inject({ url: at('both pads', '/field'), headers: { 'if-none-match': known } });
  for (const known of [etag, `W/${etag}`, `"other", ${etag}`]) {
    const answer = await get(known);
    expect([answer.statusCode, answer.rawPayload.length]).toEqual([304, 0]);
  }
  expect((await get('"other"')).statusCode).toBe(200);
});

it('says of a layout that was not solved yet that it has no answer', async () => {
  for (const url of [at('no way out'), at('no way out', '/field')]) {
    const error = await errorOf('GET', url);
    expect([error.status, error.code]).toEqual([409, 'NOT_SOLVED']);
  }
  expect((await errorOf('GET', at('none'))).code).toBe('UNKNOWN_LAYOUT');
});

it('keeps why a layout has no answer, in the job', async () => {
  const { id } = await json<JobView>('POST', '/api/jobs', { caseId: theCase.id, layout: 'no way out' });
  const job = await ended(id);
  expect(job).toMatchObject({ state: 'failed', error: { code: 'NO_WAY_OUT' } });
});

it('is done at once with what it has solved before', async () => {
  const job = await json<JobView>('POST', '/api/jobs', { caseId: theCase.id, layout: 'both pads' });
  expect(job).toMatchObject({ state: 'done', done: 1 });
});
