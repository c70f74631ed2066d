import type { Sparse } from './sparse.ts';

/** Links weaker than this times √(a_ii a_jj) do not bind; the same on all levels. */
const strength = 0.08;
/** (4/3) ÷ an upper bound of the largest eigenvalue of D⁻¹A on meshes like ours. */
const damping = 4 / 3 / 1.7;

/**
 * Groups rows that are strongly linked: first neighbourhoods that are whole, then what touches a group, then the rest.
 *
 * @returns group per row (−1: a row without strong links, left to the smoother), and the number of groups
 * Source: Vaněk, Mandel & Brezina 1996.
 */
export function aggregate(
  a: Sparse,
  diagonal: Float64Array,
): { readonly group: Int32Array; readonly count: number } {
  const { rows, start, column, value } = a;
  const group = new Int32Array(rows).fill(-1);
  const strong = (i: number, p: number): boolean =>
    column[p] !== i && value[p] * value[p] >= strength * strength * diagonal[i] * diagonal[column[p]];
  let count = 0;
  for (let i = 0; i < rows; i++) {
    let whole = group[i] < 0;
    let links = 0;
    for (let p = start[i]; p < start[i + 1] && whole; p++) {
      if (!strong(i, p)) continue;
      links++;
      whole = group[column[p]] < 0;
    }
    if (!whole || links === 0) continue;
    group[i] = count;
    for (let p = start[i]; p < start[i + 1]; p++) if (strong(i, p)) group[column[p]] = count;
    count++;
  }
  const before = group.slice();
  for (let i = 0; i < rows; i++) {
    if (group[i] >= 0) continue;
    let best = 0;
    for (let p = start[i]; p < start[i + 1]; p++) {
      if (!strong(i, p) || before[column[p]] < 0 || Math.abs(value[p]) <= best) continue;
      best = Math.abs(value[p]);
      group[i] = before[column[p]];
    }
  }
  for (let i = 0; i < rows; i++) {
    if (group[i] >= 0) continue;
    let links = 0;
    for (let p = start[i]; p < start[i + 1]; p++) {
      if (!strong(i, p) || group[column[p]] >= 0) continue;
      group[column[p]] = count;
      links++;
    }
    if (links > 0) group[i] = count++;
  }
  return { group, count };
}

/**
 * Smoothed prolongation (I − ω D⁻¹ A_F) P₀: P₀ is 1 on a group, A_F has its weak links added to the diagonal, so that
 * constants stay constants.
 */
export function smoothedProlongation(
  a: Sparse,
  diagonal: Float64Array,
  groups: { readonly group: Int32Array; readonly count: number },
): Sparse {
  const { rows, start, column, value } = a;
  const { group, count } = groups;
  const to = new Int32Array(rows + 1);
  const columns: Int32Array = new Int32Array(value.length);
  const values = new Float64Array(value.length);
  const place = new Int32Array(count).fill(-1);
  let end = 0;
  for (let i = 0; i < rows; i++) {
    const begin = end;
    const put = (c: number, v: number): void => {
      if (c < 0) return;
      if (place[c] < begin) {
        place[c] = end;
        columns[end] = c;
        values[end++] = v;
      } else values[place[c]] += v;
    };
    let filtered = diagonal[i];
    for (let p = start[i]; p < start[i + 1]; p++) {
      const j = column[p];
      const weak = value[p] * value[p] < strength * strength * diagonal[i] * diagonal[j];
      if (j !== i && weak) filtered += value[p];
    }
    if (group[i] >= 0 && filtered > 0) {
      put(group[i], 1 - damping);
      for (let p = start[i]; p < start[i + 1]; p++) {
        const j = column[p];
        const weak = value[p] * value[p] < strength * strength * diagonal[i] * diagonal[j];
        if (j !== i && !weak) put(group[j], (-damping * value[p]) / filtered);
      }
    } else put(group[i], 1);
    to[i + 1] = end;
  }
  return { rows, columns: count, start: to, column: columns.slice(0, end), value: values.slice(0, end) };
}
