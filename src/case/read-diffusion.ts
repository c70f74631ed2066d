import type { Tensor } from '../../solver/index.ts';
import type { Diffusion, Drawing, Stated } from './case.ts';
import { type CaseContext, factorTwo } from './case-context.ts';
import { joinKey } from './key-path.ts';
import { readVarying, type Varying } from './read-varying.ts';
import type { RawDiffusion, RawVarying } from './schema.ts';

/** D of the compartment or a region, with its range and source where it is one plain value. */
export interface ReadDiffusion {
  readonly diffusion: Diffusion;
  readonly varies: boolean;
  readonly stated?: Stated;
}

/**
 * Reads D: a value, an expression, a tensor by its entries, or by its principal values and how they are turned.
 *
 * @returns entries in the case's units, for places and axes with y upwards
 * @throws {CaseError} a unit or value that is refused, a tensor that is not symmetric or not positive definite
 */
export function readDiffusion(
  raw: RawDiffusion,
  key: string,
  drawing: Drawing,
  ctx: CaseContext,
): ReadDiffusion {
  const writtenDown = drawing.writtenDown === true;
  if (typeof raw === 'object' && 'tensor' in raw)
    return asRead(readTensor(raw.tensor, key, writtenDown, ctx));
  if (typeof raw === 'object' && 'principal' in raw) return asRead(readPrincipal(raw, key, writtenDown, ctx));
  const { coefficient, stated } = readVarying(raw, 'diffusion', key, ctx, { isPositive: true, writtenDown });
  return {
    diffusion: coefficient,
    varies: coefficient.kind === 'varying',
    ...(stated === undefined ? {} : { stated }),
  };
}

const asRead = (tensor: Tensor): ReadDiffusion => ({
  diffusion: { kind: 'tensor', tensor },
  varies: tensor.kind === 'varying',
});

type Rows = readonly [readonly [RawVarying, RawVarying], readonly [RawVarying, RawVarying]];

function readTensor(rows: Rows, key: string, writtenDown: boolean, ctx: CaseContext): Tensor {
  const at = joinKey(key, 'tensor');
  const entry = (i: 0 | 1, j: 0 | 1): Varying =>
    readVarying(rows[i][j], 'diffusion', joinKey(at, i, j), ctx, { writtenDown });
  const [xx, xy, yx, yy] = [entry(0, 0), entry(0, 1), entry(1, 0), entry(1, 1)] as const;
  if (!sameEntry(xy, yx, rows)) {
    ctx.fail('VALUE_OUT_OF_RANGE', 'the tensor is not symmetric', at, 'Give [[Dxx, Dxy], [Dxy, Dyy]]');
  }
  // Turning y over turns the sign of the mixed entry.
  const sign = writtenDown ? -1 : 1;
  const tensor = ofEntries([xx, xy, yy], (a, b, c) => [a, sign * b, c]);
  if (tensor.kind === 'constant') {
    const [a, b, c] = tensor.value;
    if (!(a > 0 && c > 0 && a * c > b * b)) {
      ctx.fail(
        'VALUE_OUT_OF_RANGE',
        'the tensor is not positive definite',
        at,
        `Give Dxx > 0, Dyy > 0 and Dxy² < Dxx·Dyy. ${factorTwo}`,
      );
    }
  }
  return tensor;
}

/** Expressions count as equal when they are written alike. */
function sameEntry({ coefficient: a }: Varying, { coefficient: b }: Varying, rows: Rows): boolean {
  if (a.kind === 'constant' && b.kind === 'constant') return a.value === b.value;
  return a.kind === b.kind && JSON.stringify(rows[0][1]) === JSON.stringify(rows[1][0]);
}

/** D = R diag(D₁, D₂) Rᵀ, R a turn counter-clockwise as seen. */
function readPrincipal(
  raw: Extract<RawDiffusion, { principal: unknown }>,
  key: string,
  writtenDown: boolean,
  ctx: CaseContext,
): Tensor {
  const value = (i: 0 | 1): Varying =>
    readVarying(raw.principal[i], 'diffusion', joinKey(key, 'principal', i), ctx, {
      isPositive: true,
      writtenDown,
    });
  const along = value(0);
  const across = value(1);
  const degrees = raw.turned === undefined ? 0 : ctx.quantity(raw.turned, 'angle', joinKey(key, 'turned'));
  const angle = (degrees * Math.PI) / 180;
  const cos = Math.cos(angle);
  const sin = Math.sin(angle);
  return ofEntries([along, across], (p, q) => [
    p * cos * cos + q * sin * sin,
    (p - q) * cos * sin,
    p * sin * sin + q * cos * cos,
  ]);
}

/** A tensor made of values at each place; constant when all of them are. */
function ofEntries<const V extends readonly Varying[]>(
  values: V,
  made: (...at: { [I in keyof V]: number }) => readonly [number, number, number],
): Tensor {
  type Numbers = { [I in keyof V]: number };
  const coefficients = values.map(({ coefficient }) => coefficient);
  const at = (x: number, y: number): readonly [number, number, number] =>
    made(...(coefficients.map((c) => (c.kind === 'constant' ? c.value : c.at(x, y))) as unknown as Numbers));
  if (coefficients.every((c) => c.kind === 'constant')) return { kind: 'constant', value: at(0, 0) };
  return { kind: 'varying', at };
}
