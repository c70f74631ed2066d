/**
 * Shares as whole percents that add up to what they add up to together: 100 when the shares are complete.
 * Largest remainders first, an earlier share before a later one on a tie.
 */
export function wholePercents(shares: readonly number[]): number[] {
  const exact = shares.map((share) => Math.max(0, share) * 100);
  const total = Math.round(exact.reduce((sum, value) => sum + value, 0));
  const whole = exact.map(Math.floor);
  const short = total - whole.reduce((sum, value) => sum + value, 0);
  const order = exact
    .map((value, index) => ({ index, rest: value - Math.floor(value) }))
    .sort((a, b) => b.rest - a.rest || a.index - b.index);
  for (const { index } of order.slice(0, Math.max(0, short))) whole[index] = (whole[index] ?? 0) + 1;
  return whole;
}

/** A whole percent as printed beside its bar: a share that is there but rounds to nothing is '<1'. */
export function percentText(percent: number, share: number): string {
  return percent === 0 && share > 0 ? '<1' : String(percent);
}
