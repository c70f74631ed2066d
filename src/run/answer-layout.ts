import { locate, type Mesh, meshDomain, meshQuality } from '../../mesher/index.ts';
import { assemble, exitDensity, roundingFloor, valueFromStart } from '../../solver/index.ts';
import type { Case, Layout } from '../case/case.ts';
import { CaseError } from '../case/errors.ts';
import { type LayoutDomain, layoutDomain } from '../case/layout-domain.ts';
import type { Answer, Answers } from './answers.ts';
import { answerAsked, askedOf } from './asked.ts';
import { cautionsOf, references } from './cautions.ts';
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
  const system = assemble(mesh, problem, hooks('assembling', 0.3, 0.5));
  const fields = solveFields(system, problem, domain.exits, (doing, from, to) =>
    hooks(doing, 0.5 + 0.45 * from, 0.5 + 0.45 * to),
  );
  const { meanExitTime: time, shares } = fields;
  const places = locate(mesh);
  const sameForAll = {
    reversible: system.cycle === undefined,
    ...(fields.conductance && { conductance: fields.conductance }),
    mesh: meshFacts(mesh, domain),
    numbers: {
      ...physicsNumbers(mesh, problem),
      roundingFloor: roundingFloor(system, time),
      negativeRates: system.negativeRates.count,
    },
    warnings: [
      ...physicsWarnings(theCase, mesh, places, problem, system),
      ...theCase.warnings,
      ...theCase.notAvailable,
    ],
    cautions: cautionsOf(theCase),
  };
  const starts = theCase.starts
    .filter(isAnswerable)
    .filter((start) => !options.starts || options.starts.includes(start.name));
  const weightsOf = (start: AnswerableStart, key: 'starts' | 'pins'): Float64Array =>
    startWeights(theCase, domain, mesh, places, start, key);
  const pins = theCase.pins.map((pin) => ({
    name: pin.name,
    weights: weightsOf({ kind: 'point', name: pin.name, at: pin.at }, 'pins'),
  }));
  const named = (weights: Float64Array): Record<string, Answer> =>
    Object.fromEntries([...shares].map(([name, field]) => [name, estimate(weights, field)]));
  const caughtAt: Float64Array[] = [];
  const answers = starts.map((start): Answers => {
    const weights = weightsOf(start, 'starts');
    caughtAt.push(exitDensity(system, weights, hooks('solving for the walls', 0.95, 1)).caught);
    const mean = estimate(weights, time);
    const byExit = named(weights);
    return {
      tarry: 1,
      case: theCase.title,
      caseHash: theCase.hash,
      layout: layout.name,
      start: start.name,
      units: theCase.units.length === '' ? 'none' : theCase.units,
      reversible: sameForAll.reversible,
      mean,
      shares: byExit,
      ...(sameForAll.conductance && { conductance: sameForAll.conductance }),
      pins: Object.fromEntries(
        pins.map((pin) => [pin.name, { mean: estimate(pin.weights, time), shares: named(pin.weights) }]),
      ),
      asked: answerAsked(askedOf(theCase, start.name, options.starts !== undefined), {
        mean,
        shares: byExit,
      }),
      mesh: sameForAll.mesh,
      numbers: sameForAll.numbers,
      healed: theCase.drawing.healed,
      taken: theCase.drawing.taken,
      leftOut: theCase.drawing.leftOut,
      warnings: sameForAll.warnings,
      cautions: sameForAll.cautions,
      references,
      made: { version, at: options.at, command: options.command, seconds: { mesh: 0, solve: 0 } },
    };
  });
  const seconds = { mesh: (meshed - began) / 1000, solve: (clock() - meshed) / 1000 };
  return {
    answers: answers.map((one) => ({ ...one, made: { ...one.made, seconds } })),
    mesh,
    domain,
    meanExitTime: time,
    caughtAt,
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

/** ∫ρ·field, the mesh's own value; nothing stands behind it yet but the mesh. */
function estimate(weights: Float64Array, field: Float64Array): Answer {
  return { value: valueFromStart(weights, field), kind: 'estimate' };
}
