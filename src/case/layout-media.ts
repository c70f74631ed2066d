import type { Coefficient, Medium } from '../../solver/index.ts';
import type { Case, Layout } from './case.ts';
import { isNoDrift, isNoLoss } from './read-drift.ts';

/** Stands where a tensor takes the place of D: no number does. */
const noScalar: Coefficient = { kind: 'constant', value: Number.NaN };

/**
 * What the particle meets in each part of a layout's compartment. Of several regions over one place that state the
 * same thing, the last listed counts; what none of them states is that of the whole compartment.
 *
 * @param exits names of the exits; those of the layout's floors are added to it, a region's name each
 * @returns the medium of a set of regions (indices, ascending)
 */
export function mediaOf(
  { particle, drawing }: Case,
  layout: Layout,
  exits: string[],
): (regionSet: readonly number[]) => Medium {
  const floorIn = new Map<number, { readonly kappa: number; readonly exit: number }>();
  for (const { region, kappa } of layout.floors ?? []) {
    const index = drawing.regions.findIndex(({ name }) => name === region);
    floorIn.set(index, { kappa: kappa.value, exit: exits.push(region) - 1 });
  }
  return (set) => {
    const diffusion = last(set, particle.diffusionIn) ?? particle.diffusion;
    const drift = last(set, particle.driftIn) ?? particle.drift;
    const loss = last(set, particle.lossIn) ?? particle.loss;
    const floor = last(set, floorIn);
    return {
      ...(diffusion.kind === 'tensor' ? { diffusion: noScalar, tensor: diffusion.tensor } : { diffusion }),
      ...(drift && !isNoDrift(drift) ? { drift } : {}),
      ...(loss && !isNoLoss(loss) ? { loss } : {}),
      ...(floor ? { floor } : {}),
    };
  };
}

/** What the last listed of a set's regions states. */
function last<T>(set: readonly number[], stated: ReadonlyMap<number, T>): T | undefined {
  const region = set.filter((one) => stated.has(one)).at(-1);
  return region === undefined ? undefined : stated.get(region);
}
