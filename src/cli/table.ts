/** Plain text tables: columns as wide as their widest cell, left or right aligned, two spaces apart. */

export interface Column {
  readonly title: string;
  readonly align: 'left' | 'right';
}

/** Lines of a table, indented by two spaces, without trailing blanks. */
export function tableLines(columns: readonly Column[], rows: readonly (readonly string[])[]): string[] {
  const widths = columns.map((column, c) =>
    Math.max(width(column.title), ...rows.map((row) => width(row[c] ?? ''))),
  );
  const line = (cells: readonly string[]): string =>
    `  ${columns
      .map((column, c) => {
        const cell = cells[c] ?? '';
        const blanks = ' '.repeat(Math.max(0, (widths[c] ?? 0) - width(cell)));
        return column.align === 'right' ? blanks + cell : cell + blanks;
      })
      .join('  ')}`.trimEnd();
  return [line(columns.map((column) => column.title)), ...rows.map(line)];
}

/** Breaks text into lines of at most `most` characters between words, each after `indent`. */
export function wrapped(text: string, most: number, indent: string): string[] {
  const lines: string[] = [];
  let line = '';
  for (const word of text.split(' ')) {
    if (line !== '' && width(line) + 1 + width(word) > most - indent.length) {
      lines.push(indent + line);
      line = word;
    } else line = line === '' ? word : `${line} ${word}`;
  }
  if (line !== '') lines.push(indent + line);
  return lines;
}

function width(text: string): number {
  return [...text].length;
}
