/** Outcome of a solve: a field, or the statement that there is none. */
export type Solution =
  | {
      readonly converged: true;
      readonly x: Float64Array;
      readonly residual: number;
      readonly iterations: number;
    }
  | { readonly converged: false; readonly residual: number; readonly iterations: number };

/** When an iteration ends. */
export interface IterationOptions {
  /** Backward error ‖r‖/(‖A‖‖x‖+‖b‖) wanted. */
  readonly tolerance?: number;
  readonly maxIterations?: number;
  /** Where to begin, in place of P⁻¹b; overwritten. */
  readonly from?: Float64Array;
}

export const iterationDefaults = { tolerance: 1e-13, maxIterations: 500 } as const;

export function dot(a: Float64Array, b: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < a.length; i++) sum += a[i] * b[i];
  return sum;
}
