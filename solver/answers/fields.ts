import type { System } from '../operator/system.ts';

/** Spreads values of free nodes over all mesh nodes; absorbing nodes get 0. */
export function overAllNodes(system: System, free: Float64Array): Float64Array {
  const field = new Float64Array(system.freeOf.length);
  for (let i = 0; i < system.size; i++) field[system.nodeOf[i]] = free[i];
  return field;
}

/**
 * The value of a field for a start: Σ weights_i field_i.
 *
 * @param weights, field one entry per mesh node
 */
export function valueFromStart(weights: Float64Array, field: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < field.length; i++) sum += weights[i] * field[i];
  return sum;
}
