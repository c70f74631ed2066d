import { type Chain, chainLength, enclosedArea } from '../../mesher/index.ts';
import type { Case } from '../case/case.ts';
import { formatNumber, formatQuantity } from '../case/format-quantity.ts';
import { tableLines, wrapped } from './table.ts';

/** What `check --json` and `mesh --json` print (CASE.md, answers.json). */
export interface DrawingReport {
  readonly tarry: 1;
  readonly area: number;
  readonly perimeter: number;
  readonly loops: Readonly<Record<string, { readonly corners: number; readonly length: number }>>;
  readonly taken: readonly string[];
  readonly leftOut: readonly string[];
  readonly healed: readonly object[];
  readonly mesh?: {
    readonly nodes: number;
    readonly triangles: number;
    readonly minAngle: number;
    readonly minAngleElsewhere: number;
    readonly chordError: number;
  };
  readonly warnings: readonly string[];
}

/** The drawing of a case in figures: area and perimeter by its curves, loops, what was taken, left out, healed. */
export function drawingReport(theCase: Case): DrawingReport {
  const { outline, holes, innerWalls, taken, leftOut, healed } = theCase.drawing;
  const closed = [outline, ...holes];
  const sum = (values: readonly number[]): number => values.reduce((a, b) => a + b, 0);
  return {
    tarry: 1,
    area: Math.abs(enclosedArea(outline)) - sum(holes.map((hole) => Math.abs(enclosedArea(hole)))),
    perimeter: sum(closed.map(chainLength)),
    loops: Object.fromEntries([...closed, ...innerWalls].map((chain) => [chain.name, loopFigures(chain)])),
    taken,
    leftOut,
    healed,
    warnings: [...theCase.warnings, ...theCase.notAvailable],
  };
}

function loopFigures(chain: Chain): { corners: number; length: number } {
  return { corners: chain.pieces.length, length: chainLength(chain) };
}

/** The report as a person reads it. */
export function reportLines(theCase: Case, report: DrawingReport): string[] {
  const { units } = theCase;
  const length = (value: number): string => formatQuantity(value, 'length', units);
  const square = units.length === '' ? '' : ` ${units.length}²`;
  const rows = Object.entries(report.loops).map(([name, loop]) => [
    name,
    String(loop.corners),
    length(loop.length),
  ]);
  const lines = [
    theCase.title,
    '',
    ...tableLines(
      [
        { title: 'wall loop', align: 'left' },
        { title: 'pieces', align: 'right' },
        { title: 'length', align: 'right' },
      ],
      rows,
    ),
    '',
    `Area ${formatNumber(report.area)}${square}, perimeter ${length(report.perimeter)}.`,
  ];
  if (report.mesh) lines.push(...meshLines(report.mesh, length));
  for (const text of report.taken) lines.push(...wrapped(`Taken: ${text}`, 100, ''));
  for (const text of report.leftOut) lines.push(...wrapped(`Left out: ${text}`, 100, ''));
  for (const { what, loop, at } of theCase.drawing.healed) {
    lines.push(`Healed: ${what} on ${loop} at (${formatNumber(at[0])}, ${formatNumber(at[1])})`);
  }
  for (const text of report.warnings) lines.push(...wrapped(`Warning: ${text}`, 100, ''));
  return lines;
}

function meshLines(mesh: NonNullable<DrawingReport['mesh']>, length: (value: number) => string): string[] {
  return [
    `${formatNumber(mesh.triangles, 7)} triangles on ${formatNumber(mesh.nodes, 7)} nodes; smallest angle ${mesh.minAngle.toFixed(1)}°` +
      ` (${mesh.minAngleElsewhere.toFixed(1)}° away from corners sharper than the goal).`,
    `Curves are at most ${length(mesh.chordError)} from the chords that stand for them.`,
  ];
}
