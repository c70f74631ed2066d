/**
 * Steps between two names: insertions, deletions, replacements and swaps of neighbours (optimal string alignment;
 * Damerau 1964, Levenshtein 1966, recalled).
 */
function distance(a: string, b: string): number {
  let before: number[] = [];
  let last = Array.from({ length: b.length + 1 }, (_, j) => j);
  for (let i = 1; i <= a.length; i++) {
    const row = [i];
    for (let j = 1; j <= b.length; j++) {
      const same = a[i - 1] === b[j - 1] ? 0 : 1;
      let steps = Math.min((last[j] ?? 0) + 1, (row[j - 1] ?? 0) + 1, (last[j - 1] ?? 0) + same);
      const swapped = i > 1 && j > 1 && a[i - 1] === b[j - 2] && a[i - 2] === b[j - 1];
      if (swapped) steps = Math.min(steps, (before[j - 2] ?? 0) + 1);
      row.push(steps);
    }
    before = last;
    last = row;
  }
  return last[b.length] ?? 0;
}

/** The known name most like `name`, whatever its distance; undefined when nothing is known. */
export function nearestName(name: string, known: Iterable<string>): string | undefined {
  const wanted = name.slice(0, 60).toLowerCase();
  let best: string | undefined;
  let least = Number.POSITIVE_INFINITY;
  for (const candidate of known) {
    const steps = distance(wanted, candidate.slice(0, 60).toLowerCase());
    if (steps < least) [best, least] = [candidate, steps];
  }
  return best;
}

/** Says which known name is meant, for a remedy: `Did you mean "left pad"? Known: …`. */
export function suggestName(name: string, known: Iterable<string>, kind: string): string {
  const all = [...known];
  const nearest = nearestName(name, all);
  if (nearest === undefined) return `The case has no ${kind} yet`;
  const listed = all.slice(0, 12).map((each) => JSON.stringify(each));
  const list = listed.join(', ') + (all.length > listed.length ? ', …' : '');
  return all.length === 1
    ? `Did you mean ${JSON.stringify(nearest)}? It is the only ${kind}`
    : `Did you mean ${JSON.stringify(nearest)}? Known: ${list}`;
}
