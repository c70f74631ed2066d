/** A sparse rectangular matrix by rows, diagonal included where it is square. */
export interface Sparse {
  readonly rows: number;
  readonly columns: number;
  readonly start: Int32Array;
  readonly column: Int32Array;
  readonly value: Float64Array;
}

/** The product A B, row by row (Gustavson 1978). */
export function multiply(a: Sparse, b: Sparse): Sparse {
  const start = new Int32Array(a.rows + 1);
  const lastRow = new Int32Array(b.columns).fill(-1);
  for (let i = 0; i < a.rows; i++) {
    let count = 0;
    for (let p = a.start[i]; p < a.start[i + 1]; p++) {
      const k = a.column[p];
      for (let q = b.start[k]; q < b.start[k + 1]; q++) {
        if (lastRow[b.column[q]] === i) continue;
        lastRow[b.column[q]] = i;
        count++;
      }
    }
    start[i + 1] = start[i] + count;
  }
  const column = new Int32Array(start[a.rows]);
  const value = new Float64Array(start[a.rows]);
  const place = new Int32Array(b.columns).fill(-1);
  for (let i = 0; i < a.rows; i++) {
    const begin = start[i];
    let end = begin;
    for (let p = a.start[i]; p < a.start[i + 1]; p++) {
      const k = a.column[p];
      const factor = a.value[p];
      for (let q = b.start[k]; q < b.start[k + 1]; q++) {
        const j = b.column[q];
        if (place[j] < begin) {
          place[j] = end;
          column[end] = j;
          value[end++] = factor * b.value[q];
        } else value[place[j]] += factor * b.value[q];
      }
    }
  }
  return { rows: a.rows, columns: b.columns, start, column, value };
}

export function transpose(a: Sparse): Sparse {
  const start = new Int32Array(a.columns + 1);
  for (let p = 0; p < a.column.length; p++) start[a.column[p] + 1]++;
  for (let j = 0; j < a.columns; j++) start[j + 1] += start[j];
  const column = new Int32Array(a.column.length);
  const value = new Float64Array(a.column.length);
  const next = start.slice(0, a.columns);
  for (let i = 0; i < a.rows; i++) {
    for (let p = a.start[i]; p < a.start[i + 1]; p++) {
      const at = next[a.column[p]]++;
      column[at] = i;
      value[at] = a.value[p];
    }
  }
  return { rows: a.columns, columns: a.rows, start, column, value };
}

export function diagonalOf(a: Sparse): Float64Array {
  const diagonal = new Float64Array(a.rows);
  for (let i = 0; i < a.rows; i++) {
    for (let p = a.start[i]; p < a.start[i + 1]; p++) if (a.column[p] === i) diagonal[i] = a.value[p];
  }
  return diagonal;
}
