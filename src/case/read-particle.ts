import type { Case, Diffusion, Drawing, Particle } from './case.ts';
import type { CaseContext } from './case-context.ts';
import { joinKey } from './key-path.ts';
import { suggestName } from './nearest-name.ts';
import { readDiffusion } from './read-diffusion.ts';
import { isNoLoss, readDrift, readLoss } from './read-drift.ts';
import type { RawCase } from './schema.ts';
import { entriesOf, type Named } from './schema-parts.ts';

/**
 * Reads D, noise, drift and loss.
 *
 * @throws {CaseError} NOISE_NOT_STATED where D varies and the case does not say how noise is read, TENSOR_CONVENTION
 *   where that reading means nothing for a tensor; values refused
 */
export function readParticle(raw: RawCase['particle'], drawing: Drawing, ctx: CaseContext): Particle {
  const everywhere = readDiffusion(raw.diffusion, 'particle.diffusion', drawing, ctx);
  let varies = everywhere.varies ? 'D is an expression' : '';
  const diffusionIn = byRegion(raw.diffusionIn, 'particle.diffusionIn', drawing, ctx, (entry, key) => {
    const own = readDiffusion(entry, key, drawing, ctx);
    if (own.varies) varies = 'D is an expression';
    if (varies === '') varies = 'D differs by region';
    return own.diffusion;
  });
  if (varies !== '' && raw.noise === undefined) refuseNoise(varies, ctx);
  const noise = varies === '' ? 'isothermal' : (raw.noise ?? 'isothermal');
  refuseTensorReading(noise, [everywhere.diffusion, ...diffusionIn.values()], ctx);
  const { stated } = everywhere;
  return {
    noise,
    diffusion: everywhere.diffusion,
    diffusionIn,
    ...(raw.drift === undefined ? {} : { drift: readDrift(raw.drift, 'particle.drift', drawing, ctx) }),
    driftIn: byRegion(raw.driftIn, 'particle.driftIn', drawing, ctx, (entry, key) =>
      readDrift(entry, key, drawing, ctx),
    ),
    ...(raw.loss === undefined ? {} : { loss: readLoss(raw.loss, 'particle.loss', drawing, ctx) }),
    lossIn: byRegion(raw.lossIn, 'particle.lossIn', drawing, ctx, (entry, key) =>
      readLoss(entry, key, drawing, ctx),
    ),
    ...(stated === undefined ? {} : { stated }),
  };
}

/** Whether particles can be lost inside. */
export const canBeLost = ({ loss, lossIn }: Case['particle']): boolean =>
  [...(loss ? [loss] : []), ...lossIn.values()].some((rate) => !isNoLoss(rate));

function refuseNoise(why: string, ctx: CaseContext): never {
  return ctx.fail(
    'NOISE_NOT_STATED',
    `${why}, so the case must say how noise is read, and "noise" is missing`,
    'particle',
    'Add one of these, for dX = √(2D) dW: "noise": "ito" takes D at the start of each step (L u = D Δu); "stratonovich" half way (L u = √D ∇·(√D ∇u)); "isothermal" at its end (L u = ∇·(D ∇u), the flux J = −D ∇p of Fick\'s law, right for a medium at one temperature). They differ by tens of per cent',
  );
}

/** Under Itô a tensor may vary but not jump; under Stratonovich a tensor that does either has no one meaning (METHODS 1). */
function refuseTensorReading(noise: Particle['noise'], all: readonly Diffusion[], ctx: CaseContext): void {
  if (noise === 'isothermal' || all.every(({ kind }) => kind !== 'tensor')) return;
  const first = all[0];
  const jumps = all.some((each) => !sameDiffusion(each, first));
  if (noise === 'stratonovich') {
    const varies = jumps || all.some((each) => each.kind === 'tensor' && each.tensor.kind === 'varying');
    if (!varies) return;
    ctx.fail(
      'TENSOR_CONVENTION',
      'a diffusion tensor that varies has no one Stratonovich reading: it depends on which root of D is meant',
      'particle.noise',
      'Give "ito" or "isothermal", with the drift that your root of D leads to',
    );
  }
  if (!jumps) return;
  ctx.fail(
    'TENSOR_CONVENTION',
    'a diffusion tensor that jumps from one region to the next has no Itô reading: its divergence is needed there',
    'particle.noise',
    'Give "isothermal", or one tensor for the whole compartment; it may vary smoothly',
  );
}

function sameDiffusion(a: Diffusion, b: Diffusion | undefined): boolean {
  if (a === b) return true;
  if (a.kind !== 'tensor' || b?.kind !== 'tensor') return false;
  if (a.tensor.kind !== 'constant' || b.tensor.kind !== 'constant') return false;
  return a.tensor.value.join() === b.tensor.value.join();
}

/** Entries by region's name, read and kept by the region's index. */
function byRegion<T, R>(
  map: Named<T> | undefined,
  at: string,
  drawing: Drawing,
  ctx: CaseContext,
  read: (entry: T, key: string) => R,
): Map<number, R> {
  const names = drawing.regions.map((region) => region.name);
  return new Map(
    entriesOf(map).map(([name, entry]) => {
      const key = joinKey(at, name);
      const index = names.indexOf(name);
      if (index < 0) {
        const remedy = suggestName(name, names, 'region');
        ctx.fail('NAME_UNKNOWN', `no region is called ${JSON.stringify(name)}`, key, remedy);
      }
      return [index, read(entry, key)] as const;
    }),
  );
}
