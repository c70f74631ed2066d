import type { CaseUpload } from './contract.ts';

/** An uploaded drawing with what it does not say itself. */
export type DrawnUpload = Extract<CaseUpload, { svg: string }>;

/** Name of the one layout that a case made of a drawing has. */
export const FIRST_LAYOUT = 'as drawn';

/**
 * Writes a case file for an uploaded drawing, so that it enters by the same way as every other case.
 *
 * @returns the case as text and its drawing under the name that the case uses
 */
export function drawingCase(upload: DrawnUpload): {
  text: string;
  file: string;
  files: Record<string, string>;
} {
  const drawing = drawingName(upload.name);
  const walls = wallsOf(upload.catching);
  const given = {
    tarry: 1,
    title: drawing.replace(/\.svg$/i, ''),
    units: { length: upload.length, time: upload.time },
    drawing: {
      file: drawing,
      ...(upload.drawingUnit !== undefined && {
        scale: {
          between: [
            [0, 0],
            [1, 0],
          ],
          is: upload.drawingUnit,
        },
      }),
    },
    particle: { diffusion: upload.diffusion },
    walls: Object.fromEntries(walls.map(({ name, on }) => [name, { on }])),
    layouts: { [FIRST_LAYOUT]: Object.fromEntries(walls.map(({ name }) => [name, 'absorbing'])) },
  };
  return {
    text: JSON.stringify(given, null, 2),
    file: `${given.title}.case.json`,
    files: { [drawing]: upload.svg },
  };
}

/** The last part of the name given, ending in .svg. */
function drawingName(name: string): string {
  const last = name.split(/[/\\]/).at(-1)?.replace(/\p{C}/gu, '').trim() ?? '';
  const stem = last.replace(/\.svg$/i, '');
  if (!/[^.\s]/.test(stem)) return 'drawing.svg';
  return stem === last ? `${stem}.svg` : last;
}

/** One named wall per catching loop; names that the case file keeps for itself get another. */
function wallsOf(catching: readonly string[]): { name: string; on: string }[] {
  const renamed: Readonly<Record<string, string>> = {
    all: 'every wall',
    outline: 'outer wall',
    everywhere: 'wall everywhere',
    lost: 'wall lost',
  };
  return [...new Set(catching)].map((on) => ({
    name: Object.hasOwn(renamed, on) ? `${renamed[on]}` : on,
    on,
  }));
}
