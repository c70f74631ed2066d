/**
 * One unit for all times on the page. Answers come in the case's own time unit; a page full of '1 920 s' reads worse
 * than '32 min'. The numbers are the same, only the unit is chosen here.
 */
export interface DisplayUnit {
  readonly name: string;
  /** What a value in the case's unit is multiplied by. */
  readonly factor: number;
}

const SECONDS: readonly (readonly [name: string, seconds: number])[] = [
  ['ns', 1e-9],
  ['µs', 1e-6],
  ['ms', 1e-3],
  ['s', 1],
  ['min', 60],
  ['h', 3600],
  ['d', 86_400],
];

/** The largest unit in which the longest time still reads 3 or more; the case's own unit if it is not a known one. */
export function timeUnitFor(longest: number, caseUnit: string): DisplayUnit {
  const own = SECONDS.find(([name]) => name === caseUnit || (name === 'µs' && caseUnit === 'us'));
  if (own === undefined || !(longest > 0) || !Number.isFinite(longest)) return { name: caseUnit, factor: 1 };
  let chosen = SECONDS[0] ?? own;
  for (const unit of SECONDS) if ((longest * own[1]) / unit[1] >= 3) chosen = unit;
  return { name: chosen[0], factor: own[1] / chosen[1] };
}
