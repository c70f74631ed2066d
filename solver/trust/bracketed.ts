/**
 * A figure with what is known of its error.
 *
 * - `guaranteed`: the exact value for the meshed polygon lies in [low, high], up to rounding and, where coefficients vary,
 *   up to their quadrature.
 * - `estimate`: it probably does.
 */
export interface Bracketed {
  /** Middle of low and high. */
  readonly value: number;
  readonly low: number;
  readonly high: number;
  readonly kind: 'guaranteed' | 'estimate';
}

/** The interval about a middle. */
export function about(middle: number, half: number, kind: Bracketed['kind'] = 'guaranteed'): Bracketed {
  return { value: middle, low: middle - half, high: middle + half, kind };
}

/** The interval between two ends. */
export function between(low: number, high: number, kind: Bracketed['kind'] = 'guaranteed'): Bracketed {
  return { value: (low + high) / 2, low, high, kind };
}

/** What is known to lie in `limits` as well. */
export function within({ low, high, kind }: Bracketed, least: number, most: number): Bracketed {
  return between(Math.max(low, least), Math.min(high, most), kind);
}

/** a·x + b. */
export function linear({ low, high, kind }: Bracketed, a: number, b: number): Bracketed {
  return a >= 0 ? between(a * low + b, a * high + b, kind) : between(a * high + b, a * low + b, kind);
}
