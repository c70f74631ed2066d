import type { Coefficient, Drift } from '../../solver/index.ts';
import type { Drawing } from './case.ts';
import type { CaseContext } from './case-context.ts';
import { joinKey } from './key-path.ts';
import { readVarying } from './read-varying.ts';
import type { RawDrift, RawVarying } from './schema.ts';

/**
 * Reads a drift: its two components, or the potential V/kT it comes from (b = −D∇V).
 *
 * @returns in the case's units, for places and axes with y upwards
 * @throws {CaseError} a unit, value or expression that is refused
 */
export function readDrift(raw: RawDrift, key: string, drawing: Drawing, ctx: CaseContext): Drift {
  const options = { writtenDown: drawing.writtenDown === true };
  if ('potential' in raw) {
    const { coefficient } = readVarying(raw.potential, 'number', joinKey(key, 'potential'), ctx, options);
    return { kind: 'potential', value: coefficient };
  }
  const x = readVarying(raw.x, 'speed', joinKey(key, 'x'), ctx, options).coefficient;
  const y = readVarying(raw.y, 'speed', joinKey(key, 'y'), ctx, options).coefficient;
  return { kind: 'components', x, y: options.writtenDown ? negated(y) : y };
}

function negated(c: Coefficient): Coefficient {
  return c.kind === 'constant'
    ? { kind: 'constant', value: 0 - c.value }
    : { kind: 'varying', at: (x, y) => -c.at(x, y) };
}

/** Whether a drift pushes nowhere. */
export function isNoDrift(drift: Drift): boolean {
  if (drift.kind === 'potential') return drift.value.kind === 'constant';
  return [drift.x, drift.y].every((part) => part.kind === 'constant' && part.value === 0);
}

/**
 * Reads a loss rate.
 *
 * @throws {CaseError} VALUE_OUT_OF_RANGE for one below 0; one that varies is looked at by the solver, place by place
 */
export function readLoss(raw: RawVarying, key: string, drawing: Drawing, ctx: CaseContext): Coefficient {
  const { coefficient } = readVarying(raw, 'rate', key, ctx, { writtenDown: drawing.writtenDown === true });
  if (coefficient.kind === 'constant' && coefficient.value < 0) {
    ctx.fail(
      'VALUE_OUT_OF_RANGE',
      'a loss rate is below 0',
      key,
      'Give a rate from 0 on, such as "0.01 1/s"',
    );
  }
  return coefficient;
}

/** Whether a loss takes nothing anywhere. */
export const isNoLoss = (loss: Coefficient): boolean => loss.kind === 'constant' && loss.value === 0;
