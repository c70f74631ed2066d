import { summarise, type WalkSummary, walk } from '../../solver/index.ts';
import { layoutDomain } from '../../src/case/layout-domain.ts';
import { readCase } from '../../src/case/read-case.ts';
import { isAnswerable } from '../../src/run/start-weights.ts';
import { layoutGeometry, walkStart } from '../../src/run/walk-setting.ts';
import { listed } from '../published/listed.ts';
import { caseText, type Setting } from '../published/setting.ts';

/** A case with a value that a source states, for walkers. */
export interface WalkCase {
  /** Id in tests/data/checks.json, and what it is about. */
  readonly id: string;
  readonly about: string;
  readonly setting: Setting;
  readonly start: object;
  readonly mean?: number;
  /** Share of an exit, by its name. */
  readonly share?: readonly [exit: string, value: number];
}

const sides = { left: { on: 'outline', where: 'x == 0' }, right: { on: 'outline', where: 'x == 1' } };

function strip(kinds: Setting['kinds'], particle?: object, regions: object = {}): Setting {
  return {
    drawing: { outline: { rectangle: [0, 0, 1, 0.25] }, regions },
    walls: sides,
    kinds,
    ...(particle && { particle }),
  };
}

function disc(kinds: Setting['kinds'], particle?: object, regions: object = {}, holes: object = {}): Setting {
  return {
    drawing: { outline: { circle: [0, 0], radius: 1 }, regions, holes },
    walls: {
      rim: { on: 'outline' },
      arc: { on: 'outline', angles: [-5.729577951308232, 5.729577951308232] },
      ...('inner' in holes && { inner: { on: 'inner' } }),
    },
    kinds,
    ...(particle && { particle }),
  };
}

const at = (x: number, y: number) => ({ point: [x, y] });
const everywhere = { evenIn: 'everywhere' };
const expression = (text: string) => ({ expression: text, unit: '1' });
const both = { left: 'absorbing', right: 'absorbing' };
const twoMedia = (noise: string) =>
  strip(
    { right: 'absorbing' },
    { diffusion: 0.5, diffusionIn: { fast: 2 }, noise },
    { fast: { rectangle: [0, 0, 0.3, 0.25] } },
  );
const varying = { diffusion: expression('(1+x)^2') };

/** Twenty different cases: geometry, conventions, tensor, drift, loss, partly absorbing and permeable walls. */
export const walkCases: readonly WalkCase[] = [
  {
    id: 'strip-AA',
    about: 'both ends absorbing',
    setting: strip(both),
    start: at(0.25, 0.1),
    mean: 3 / 32,
    share: ['left', 0.75],
  },
  {
    id: 'strip-RA',
    about: 'a reflecting end',
    setting: strip({ right: 'absorbing' }),
    start: everywhere,
    mean: 1 / 3,
  },
  {
    id: 'disk-A',
    about: 'a disc from its centre',
    setting: disc({ rim: 'absorbing' }),
    start: at(0.5, 0),
    mean: 0.1875,
  },
  {
    id: 'annulus-inR-outA-b',
    about: 'a reflecting hole',
    setting: disc({ rim: 'absorbing' }, undefined, {}, { inner: { circle: [0, 0], radius: 0.1 } }),
    start: everywhere,
    mean: listed('annulus-inR-outA-b', 'avg'),
  },
  {
    id: 'annulus-AA-a',
    about: 'two exits, even start',
    setting: disc(
      { rim: 'absorbing', inner: 'absorbing' },
      undefined,
      {},
      { inner: { circle: [0, 0], radius: 0.5 } },
    ),
    start: at(0.75, 0),
    mean: listed('annulus-AA-a', 'u(r_mid)'),
    share: ['inner', listed('annulus-AA-a', 'pInner(r_mid)')],
  },
  {
    id: 'disk-arc-0.1',
    about: 'a narrow opening in a rim',
    setting: disc({ arc: 'absorbing' }),
    start: everywhere,
    mean: listed('disk-arc-0.1', 'avg'),
  },
  ...(['ito', 'stratonovich', 'isothermal'] as const).map(
    (noise): WalkCase => ({
      id: 'strip-2media',
      about: `D jumps, ${noise}`,
      setting: twoMedia(noise),
      start: at(0, 0.1),
      mean: listed(
        'strip-2media',
        `u(0) ${noise === 'ito' ? 'Ito' : noise === 'stratonovich' ? 'Stratonovich' : 'isothermal'}`,
      ),
    }),
  ),
  {
    id: 'strip-varD-hit',
    about: 'D = (1+x)², isothermal',
    setting: strip(both, { ...varying, noise: 'isothermal' }),
    start: at(0.5, 0.1),
    mean: listed('strip-AA-varD', 'u(0.5) isothermal'),
    share: ['right', 2 / 3],
  },
  {
    id: 'disk-A-varD',
    about: 'D = 1+r², Stratonovich',
    setting: disc({ rim: 'absorbing' }, { diffusion: expression('1+x^2+y^2'), noise: 'stratonovich' }),
    start: at(0, 0),
    mean: listed('disk-A-varD', 'u(0) Stratonovich'),
  },
  {
    id: 'disk-2media',
    about: 'a core of another D, isothermal',
    setting: disc(
      { rim: 'absorbing' },
      { diffusion: 4, diffusionIn: { core: 1 }, noise: 'isothermal' },
      { core: { circle: [0, 0], radius: 0.5 } },
    ),
    start: at(0, 0),
    mean: listed('disk-2media', 'u(0) isothermal'),
  },
  {
    id: 'strip-AA-drift1',
    about: 'drift along the strip',
    setting: strip(both, { diffusion: 1, drift: { x: 1, y: 0 } }),
    start: at(0.1, 0.1),
    mean: listed('strip-AA-drift1', 'u(0.1)'),
    share: ['right', listed('strip-AA-drift1', 'pRight(0.1)')],
  },
  {
    id: 'strip-RA-drift-2',
    about: 'drift against a reflecting end',
    setting: strip({ right: 'absorbing' }, { diffusion: 1, drift: { x: -2, y: 0 } }),
    start: at(0, 0.1),
    mean: listed('strip-RA-drift-2', 'u(0)'),
  },
  {
    id: 'disk-A-OU1',
    about: 'a pull to the centre, as a potential',
    setting: disc({ rim: 'absorbing' }, { diffusion: 1, drift: { potential: expression('(x^2+y^2)/2') } }),
    start: at(0, 0),
    mean: listed('disk-A-OU1', 'u(0)'),
  },
  {
    id: 'strip-RRob-1',
    about: 'a partly absorbing end',
    setting: strip({ right: { partlyAbsorbing: 1 } }),
    start: at(0, 0.1),
    mean: 1.5,
  },
  {
    id: 'disk-Rob2',
    about: 'a partly absorbing rim',
    setting: disc({ rim: { partlyAbsorbing: 2 } }),
    start: everywhere,
    mean: listed('disk-Rob2', 'avg'),
  },
  {
    id: 'strip-ARob-3',
    about: 'absorbing against partly absorbing',
    setting: strip({ left: 'absorbing', right: { partlyAbsorbing: 3 } }),
    start: at(0.5, 0.1),
    mean: listed('strip-ARob-3', 'u(0.5)'),
    share: ['right', listed('strip-ARob-3', 'pRobin(0.5)')],
  },
  {
    id: 'strip-AA-kill1',
    about: 'loss',
    setting: strip(both, { diffusion: 1, loss: 1 }),
    start: at(0.5, 0.1),
    mean: listed('strip-AA-kill1', 'u(0.5)'),
    share: ['lost', 1 - listed('strip-AA-kill1', 'p_wall(0.5)')],
  },
  {
    id: 'ellipse-aniso-30',
    about: 'a tensor',
    setting: {
      drawing: { outline: { ellipse: [0, 0], radii: [2, 1] } },
      walls: { rim: { on: 'outline' } },
      kinds: { rim: 'absorbing' },
      particle: { diffusion: { principal: [1, 0.1], turned: '30 deg' } },
    },
    start: at(0, 0),
    mean: listed('ellipse-aniso-30', 'u(0)'),
  },
];

export interface Walked {
  readonly summary: WalkSummary;
  /** Mean and share against the source, in standard errors. */
  readonly z: readonly number[];
}

/** Sends walkers through a case. */
export function walkCase(one: WalkCase, count: number, seed: number): Walked {
  const theCase = readCase(caseText(one.setting, { start: one.start }), { readFile: () => '' });
  const [layout] = theCase.layouts;
  const [start] = theCase.starts;
  if (!layout || !start || !isAnswerable(start)) throw new Error(`${one.id} has no layout or start`);
  const domain = layoutDomain(theCase, layout);
  const geometry = layoutGeometry(domain);
  const from = walkStart(start);
  const fine = [walk(geometry, from, { count, seed })];
  const coarse = geometry.plain ? [] : [walk(geometry, from, { count, seed, level: 'coarse' })];
  const summary = summarise(fine, coarse, domain.exits.length);
  const z: number[] = [];
  const add = (given: { value: number; standardError: number } | undefined, expected: number): void => {
    if (!given) throw new Error(`${one.id} has no such exit`);
    z.push((given.value - expected) / given.standardError);
  };
  if (one.mean !== undefined) add(summary.mean, one.mean);
  if (one.share) {
    const [exit, value] = one.share;
    add(exit === 'lost' ? summary.lost : summary.shares[domain.exits.indexOf(exit)], value);
  }
  return { summary, z };
}
