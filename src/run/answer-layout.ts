import { locate, type Mesh, meshDomain, meshQuality } from '../../mesher/index.ts';
import { assemble, exitDensity, roundingFloor } from '../../solver/index.ts';
import type { Case, Layout } from '../case/case.ts';
import { CaseError } from '../case/errors.ts';
import { type LayoutDomain, layoutDomain } from '../case/layout-domain.ts';
import { leastMoments } from '../case/read-asked.ts';
import type { Answers, Reading } from './answers.ts';
import { answerAsked, askedOf } from './asked.ts';
import { cautionsOf, references } from './cautions.ts';
import { solveFigures } from './figures.ts';
import { compartmentArea, meshOptions } from './mesh-options.ts';
import { inCaseTerms } from './name-places.ts';
import { physicsNumbers } from './physics-numbers.ts';
import { physicsWarnings } from './physics-warnings.ts';
import { solveFields } from './solved-fields.ts';
import { type AnswerableStart, isAnswerable, startWeights } from './start-weights.ts';
import { version } from './version.ts';

/** One layout meshed and solved, with what a drawing of it needs beside the answers. */
export interface LayoutAnswer {
  /** One per start, in the case's order. */
  readonly answers: readonly Answers[];
  readonly mesh: Mesh;
  readonly domain: LayoutDomain;
  /** Per node, in the case's time unit. */
  readonly meanExitTime: Float64Array;
  /** Per start and node: share of the particles caught at that node; sums to 1 less what is lost. */
  readonly caughtAt: readonly Float64Array[];
}

export interface AnswerOptions {
  /** Names of the starts wanted; all without it. */
  readonly starts?: readonly string[];
  readonly stop?: () => boolean;
  readonly progress?: (doing: string, done: number) => void;
  /** Milliseconds from any zero; only for `made.seconds`. */
  readonly clock: () => number;
  /** Date and command as they shall stand in the record. */
  readonly at: string;
  readonly command: string;
}

/**
 * Meshes and solves one layout of a case for every start.
 *
 * @throws {CaseError} where the layout has no answer as stated; places and walls named as in the drawing
 */
export function answerLayout(theCase: Case, layoutName: string, options: AnswerOptions): LayoutAnswer {
  const layout = findLayout(theCase, layoutName);
  const domain = layoutDomain(theCase, layout);
  return inCaseTerms(theCase, layout, domain, () => solveLayout(theCase, layout, domain, options));
}

/** The layout of that name, or a refusal that lists those there are. */
export function findLayout(theCase: Case, name: string): Layout {
  const layout = theCase.layouts.find((one) => one.name === name);
  if (layout) return layout;
  const known = theCase.layouts.map((one) => `"${one.name}"`).join(', ');
  throw new CaseError(
    'UNKNOWN_LAYOUT',
    `no layout is called "${name}"`,
    { key: 'layouts' },
    `Choose one of ${known}`,
  );
}

function solveLayout(
  theCase: Case,
  layout: Layout,
  domain: LayoutDomain,
  options: AnswerOptions,
): LayoutAnswer {
  const { stop, progress, clock } = options;
  const hooks = (doing: string, from: number, to: number) => ({
    ...(stop && { stop }),
    ...(progress && { progress: (done: number) => progress(doing, from + (to - from) * done) }),
  });
  const began = clock();
  const sizes = meshOptions(domain, theCase.accuracy.nodes);
  const mesh = meshDomain(domain.domain, { ...sizes, ...hooks('triangulating', 0, 0.3) });
  const meshed = clock();
  const problem = domain.problem(mesh.regionSets);
  const system = assemble(mesh, problem, hooks('assembling', 0.3, 0.4));
  const order = theCase.report?.moments ?? leastMoments;
  const fields = solveFields(
    system,
    problem,
    domain.exits,
    Math.max(order, leastMoments),
    (doing, from, to) => hooks(doing, 0.4 + 0.2 * from, 0.4 + 0.2 * to),
  );
  const places = locate(mesh);
  const placed = (start: AnswerableStart, key: 'starts' | 'pins'): Float64Array =>
    startWeights(theCase, domain, mesh, places, start, key);
  const starts = theCase.starts
    .filter(isAnswerable)
    .filter(({ name }) => !options.starts || options.starts.includes(name))
    .map((start) => ({
      name: start.name,
      weights: placed(start, 'starts'),
      asked: askedOf(theCase, start.name, options.starts !== undefined),
    }));
  const pins = theCase.pins.map(({ name, at }) => ({
    name,
    weights: placed({ kind: 'point', name, at }, 'pins'),
  }));
  const numbers = physicsNumbers(mesh, problem);
  const figures = solveFigures(
    { theCase, problem, system, fields, starts, lowestTime: numbers.lowestTime ?? 0 },
    (doing, from, to) => hooks(doing, 0.6 + 0.35 * from, 0.6 + 0.35 * to),
  );
  const pinReadings = Object.fromEntries(pins.map(({ name, weights }) => [name, figures.reading(weights)]));
  const ofLayout = {
    layout: layout.name,
    reversible: system.cycle === undefined,
    ...(fields.conductance && { conductance: fields.conductance }),
    mesh: meshFacts(mesh, domain),
    numbers: {
      ...numbers,
      roundingFloor: roundingFloor(system, fields.meanExitTime),
      negativeRates: system.negativeRates.count,
    },
    warnings: [
      ...physicsWarnings(theCase, mesh, places, problem, system),
      ...figures.warnings,
      ...theCase.warnings,
      ...theCase.notAvailable,
    ],
  };
  const made = { version, at: options.at, command: options.command };
  const caughtAt: Float64Array[] = [];
  const answers = starts.map(({ name, weights, asked }): Omit<Answers, 'made'> => {
    caughtAt.push(exitDensity(system, weights, hooks('solving for the walls', 0.95, 1)).caught);
    const reading = figures.reading(weights);
    return answersOf(theCase, ofLayout, {
      start: name,
      ...reading,
      moments: figures.moments(weights).slice(0, order),
      ...figures.reported(weights),
      pins: pinReadings,
      asked: asked.map((one) => answerAsked(one, figures.value(one, weights))),
    });
  });
  const seconds = { mesh: (meshed - began) / 1000, solve: (clock() - meshed) / 1000 };
  return {
    answers: answers.map((one) => ({ ...one, made: { ...made, seconds } })),
    mesh,
    domain,
    meanExitTime: fields.meanExitTime,
    caughtAt,
  };
}

type OfLayout = Pick<Answers, 'layout' | 'reversible' | 'conductance' | 'mesh' | 'numbers' | 'warnings'>;
type OfStart = Pick<
  Answers,
  'start' | 'moments' | 'pins' | 'asked' | 'decayTime' | 'survival' | 'occupation'
> &
  Reading;

/** Puts together what answers.json holds, in the order of CASE.md. */
function answersOf(theCase: Case, ofLayout: OfLayout, ofStart: OfStart): Omit<Answers, 'made'> {
  const { layout, reversible, conductance, mesh, numbers, warnings } = ofLayout;
  const { start, mean, sd, moments, times, shares, decayTime, survival, occupation, pins, asked } = ofStart;
  return {
    tarry: 1,
    case: theCase.title,
    caseHash: theCase.hash,
    layout,
    start,
    units: theCase.units.length === '' ? 'none' : theCase.units,
    reversible,
    mean,
    ...(sd && { sd }),
    moments,
    ...(times && { times }),
    shares,
    ...(conductance && { conductance }),
    ...(decayTime && { decayTime }),
    ...(survival && { survival }),
    ...(occupation && { occupation }),
    pins,
    asked,
    mesh,
    numbers,
    healed: theCase.drawing.healed,
    taken: theCase.drawing.taken,
    leftOut: theCase.drawing.leftOut,
    warnings,
    cautions: cautionsOf(theCase),
    references,
  };
}

function meshFacts(mesh: Mesh, { domain }: LayoutDomain): Answers['mesh'] {
  return {
    nodes: mesh.nodes.length / 2,
    triangles: mesh.triangles.length / 3,
    area: compartmentArea(domain),
    minAngle: meshQuality(mesh).minAngle,
    chordError: mesh.chordError,
  };
}
