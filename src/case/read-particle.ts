import type { Coefficient } from '../../solver/index.ts';
import type { Case, Drawing } from './case.ts';
import { type CaseContext, factorTwo } from './case-context.ts';
import { joinKey } from './key-path.ts';
import { suggestName } from './nearest-name.ts';
import { readVarying, type Varying } from './read-varying.ts';
import type { RawCase, RawDiffusion, RawDrift, RawVarying } from './schema.ts';
import { entriesOf, type Named } from './schema-parts.ts';

/** The particle of a case, and what of it holds back every layout. */
export interface ReadParticle {
  readonly particle: Case['particle'];
  readonly notAvailable: readonly string[];
  /** Whether particles can be lost inside. */
  readonly hasLoss: boolean;
}

/** Why D varies or why not, beside D itself. */
interface ReadDiffusion {
  readonly coefficient: Coefficient;
  readonly varies: boolean;
  readonly stated?: Case['particle']['stated'];
}

/**
 * Reads D, noise, drift and loss.
 *
 * @throws {CaseError} NOISE_NOT_STATED where D varies and the case does not say how noise is read; values refused
 */
export function readParticle(raw: RawCase['particle'], drawing: Drawing, ctx: CaseContext): ReadParticle {
  const held: string[] = [];
  const hold = (what: string, place: string) => {
    const told = ctx.notYet(what, place);
    if (told !== undefined && !held.includes(told)) held.push(told);
  };
  const diffusion = readDiffusion(raw.diffusion, 'particle.diffusion', drawing, ctx, hold);
  const regions = regionEntries(raw.diffusionIn, 'particle.diffusionIn', drawing, ctx);
  const diffusionIn = new Map<number, Coefficient>();
  let varies = diffusion.varies ? 'D is an expression' : regions.length > 0 ? 'D differs by region' : '';
  for (const { entry, key, index } of regions) {
    const own = readDiffusion(entry, key, drawing, ctx, hold);
    if (own.varies) varies = 'D is an expression';
    diffusionIn.set(index, own.coefficient);
  }
  if (varies !== '' && raw.noise === undefined) refuseNoise(varies, ctx);
  const hasTensor = [raw.diffusion, ...regions.map(({ entry }) => entry)].some(isTensor);
  if (raw.noise === 'stratonovich' && hasTensor && varies !== '') {
    ctx.fail(
      'NOISE_NOT_STATED',
      'a diffusion tensor that varies has no one Stratonovich reading: it depends on which root of D is meant',
      'particle.noise',
      'Give "ito" or "isothermal", with the drift that your root of D leads to',
    );
  }
  readDrifts(raw, drawing, ctx, hold);
  const hasLoss = readLosses(raw, drawing, ctx, hold);
  const { coefficient, stated } = diffusion;
  return {
    particle: {
      noise: raw.noise ?? 'isothermal',
      diffusion: coefficient,
      diffusionIn,
      ...(stated === undefined ? {} : { stated }),
    },
    notAvailable: held,
    hasLoss,
  };
}

type Hold = (what: string, place: string) => void;

const isTensor = (raw: RawDiffusion): boolean =>
  typeof raw === 'object' && ('tensor' in raw || 'principal' in raw);

function refuseNoise(why: string, ctx: CaseContext): never {
  return ctx.fail(
    'NOISE_NOT_STATED',
    `${why}, so the case must say how noise is read, and "noise" is missing`,
    'particle',
    'Add one of these, for dX = √(2D) dW: "noise": "ito" takes D at the start of each step (L u = D Δu); "stratonovich" half way (L u = √D ∇·(√D ∇u)); "isothermal" at its end (L u = ∇·(D ∇u), the flux J = −D ∇p of Fick\'s law, right for a medium at one temperature). They differ by tens of per cent',
  );
}

function readDiffusion(
  raw: RawDiffusion,
  key: string,
  drawing: Drawing,
  ctx: CaseContext,
  hold: Hold,
): ReadDiffusion {
  const options = { isPositive: true, writtenDown: drawing.writtenDown === true };
  if (typeof raw === 'object' && ('tensor' in raw || 'principal' in raw)) {
    hold('tensor', key);
    const varies = 'tensor' in raw ? readTensor(raw.tensor, key, ctx) : readPrincipal(raw, key, ctx);
    // No number stands for a tensor: NaN keeps one from being solved as if D were scalar.
    return { coefficient: { kind: 'constant', value: Number.NaN }, varies };
  }
  const read = readVarying(raw, 'diffusion', key, ctx, options);
  if (read.hasRange) ctx.notYet('within', key);
  return {
    coefficient: read.coefficient,
    varies: read.coefficient.kind === 'varying',
    ...(read.stated === undefined ? {} : { stated: read.stated }),
  };
}

type Rows = readonly [readonly [RawVarying, RawVarying], readonly [RawVarying, RawVarying]];

function readTensor(rows: Rows, key: string, ctx: CaseContext): boolean {
  const read = rows.map((row, i) =>
    row.map((entry, j) => readVarying(entry, 'diffusion', joinKey(key, 'tensor', i, j), ctx)),
  );
  const [[xx, xy] = [], [yx, yy] = []] = read;
  const at = joinKey(key, 'tensor');
  const values = [xx, xy, yx, yy].map((entry) => entry?.stated?.value);
  const [a, b, c, d] = values;
  const differs =
    b !== undefined && c !== undefined ? b !== c : JSON.stringify(rows[0][1]) !== JSON.stringify(rows[1][0]);
  if (differs)
    ctx.fail('VALUE_OUT_OF_RANGE', 'the tensor is not symmetric', at, 'Give [[Dxx, Dxy], [Dxy, Dyy]]');
  if (a !== undefined && b !== undefined && d !== undefined && !(a > 0 && d > 0 && a * d > b * b)) {
    ctx.fail(
      'VALUE_OUT_OF_RANGE',
      'the tensor is not positive definite',
      at,
      `Give Dxx > 0, Dyy > 0 and Dxy² < Dxx·Dyy. ${factorTwo}`,
    );
  }
  return [xx, xy, yx, yy].some((entry) => entry?.coefficient.kind === 'varying');
}

function readPrincipal(
  raw: Extract<RawDiffusion, { principal: unknown }>,
  key: string,
  ctx: CaseContext,
): boolean {
  const both: Varying[] = raw.principal.map((entry, i) =>
    readVarying(entry, 'diffusion', joinKey(key, 'principal', i), ctx, { isPositive: true }),
  );
  if (raw.turned !== undefined) ctx.quantity(raw.turned, 'angle', joinKey(key, 'turned'));
  return both.some((entry) => entry.coefficient.kind === 'varying');
}

/** Entries by region with the region's index. */
function regionEntries<T>(map: Named<T> | undefined, at: string, drawing: Drawing, ctx: CaseContext) {
  const names = drawing.regions.map((region) => region.name);
  return entriesOf(map).map(([name, entry]) => {
    const key = joinKey(at, name);
    const index = names.indexOf(name);
    if (index < 0) {
      ctx.fail(
        'NAME_UNKNOWN',
        `no region is called ${JSON.stringify(name)}`,
        key,
        suggestName(name, names, 'region'),
      );
    }
    return { entry, key, index };
  });
}

function readDrifts(raw: RawCase['particle'], drawing: Drawing, ctx: CaseContext, hold: Hold): void {
  const read = (drift: RawDrift, key: string): void => {
    const parts =
      'potential' in drift
        ? [readVarying(drift.potential, 'number', joinKey(key, 'potential'), ctx)]
        : [
            readVarying(drift.x, 'speed', joinKey(key, 'x'), ctx),
            readVarying(drift.y, 'speed', joinKey(key, 'y'), ctx),
          ];
    const isZero = parts.every(
      ({ coefficient: c }) => c.kind === 'constant' && ('potential' in drift || c.value === 0),
    );
    if (!isZero) hold('drift', key);
  };
  if (raw.drift !== undefined) read(raw.drift, 'particle.drift');
  for (const { entry, key } of regionEntries(raw.driftIn, 'particle.driftIn', drawing, ctx)) read(entry, key);
}

function readLosses(raw: RawCase['particle'], drawing: Drawing, ctx: CaseContext, hold: Hold): boolean {
  let hasLoss = false;
  const read = (loss: RawVarying, key: string): void => {
    const { coefficient } = readVarying(loss, 'rate', key, ctx);
    if (coefficient.kind === 'constant' && coefficient.value < 0) {
      ctx.fail(
        'VALUE_OUT_OF_RANGE',
        'a loss rate is below 0',
        key,
        'Give a rate from 0 on, such as "0.01 1/s"',
      );
    }
    if (coefficient.kind === 'constant' && coefficient.value === 0) return;
    hasLoss = true;
    hold('loss', key);
  };
  if (raw.loss !== undefined) read(raw.loss, 'particle.loss');
  for (const { entry, key } of regionEntries(raw.lossIn, 'particle.lossIn', drawing, ctx)) read(entry, key);
  return hasLoss;
}
