import type { CaseUnits, Figure } from './case.ts';
import type { Dimension } from './dimensions.ts';
import { exampleOf } from './dimensions.ts';
import { suggestName } from './nearest-name.ts';
import { parseQuantity, type Refuse } from './units.ts';

/** Names that figures may speak of. */
export interface FigureNames {
  /** Walls, and what else can catch. */
  readonly exits: readonly string[];
  readonly regions: readonly string[];
}

/** The forms of figures, as a remedy lists them. */
const forms =
  '"mean", "standard deviation", "median", "time to 95 %", "share of WALL", "share of WALL by 20 min", "time for 50 % to leave by WALL", "still inside at 20 min", "time in REGION" or "decay time"';

/** Whether a figure is a time or a fraction. */
export const figureDimension = (figure: Figure): Dimension =>
  figure.kind === 'share' || figure.kind === 'still inside' ? 'fraction' : 'time';

/**
 * Reads a figure as it is asked for (CASE.md, Asked). Times in the case's time unit, fractions 0 to 1.
 *
 * @throws what `refuse` throws: FIGURE_NOT_UNDERSTOOD, NAME_UNKNOWN, a time or percentage that is refused
 */
export function parseFigure(text: string, names: FigureNames, units: CaseUnits, refuse: Refuse): Figure {
  const plain = text.trim().replace(/\s+/g, ' ');
  for (const kind of ['mean', 'standard deviation', 'median', 'decay time'] as const) {
    if (plain === kind) return { kind };
  }
  const time = (written: string) => timeFrom(written, units, refuse);
  const timeTo = /^time to (.+)$/.exec(plain)?.[1];
  if (timeTo !== undefined) return { kind: 'time to', fraction: percentage(timeTo, refuse) };
  const inside = /^still inside at (.+)$/.exec(plain)?.[1];
  if (inside !== undefined) return { kind: 'still inside', at: time(inside) };
  const region = /^time in (.+)$/.exec(plain)?.[1];
  if (region !== undefined)
    return { kind: 'time in', region: nameFrom(region, names.regions, 'region', refuse) };
  const leave = /^time for (.+?) to leave by (.+)$/.exec(plain);
  if (leave !== null) {
    const [, part = '', wall = ''] = leave;
    return {
      kind: 'time to leave by',
      wall: nameFrom(wall, names.exits, 'wall', refuse),
      fraction: percentage(part, refuse),
    };
  }
  const share = /^share of (.+)$/.exec(plain)?.[1];
  if (share !== undefined) return shareFrom(share, names.exits, time, refuse);
  return refuse(
    'FIGURE_NOT_UNDERSTOOD',
    `the figure ${JSON.stringify(text)} is not understood`,
    `Give ${forms}`,
  );
}

/** A wall's own name may hold ' by ': a name that is known wins. */
function shareFrom(
  text: string,
  exits: readonly string[],
  time: (text: string) => number,
  refuse: Refuse,
): Figure {
  if (exits.includes(text)) return { kind: 'share', wall: text };
  const at = text.lastIndexOf(' by ');
  if (at < 0) return { kind: 'share', wall: nameFrom(text, exits, 'wall', refuse) };
  return {
    kind: 'share',
    wall: nameFrom(text.slice(0, at), exits, 'wall', refuse),
    by: time(text.slice(at + 4)),
  };
}

function nameFrom(text: string, known: readonly string[], kind: string, refuse: Refuse): string {
  const name = known.find((each) => each === text || JSON.stringify(each) === text);
  return (
    name ??
    refuse('NAME_UNKNOWN', `no ${kind} is called ${JSON.stringify(text)}`, suggestName(text, known, kind))
  );
}

function timeFrom(text: string, units: CaseUnits, refuse: Refuse): number {
  const value = parseQuantity(text, 'time', units, refuse);
  if (value > 0) return value;
  return refuse(
    'VALUE_OUT_OF_RANGE',
    `${JSON.stringify(text)} is not after the start`,
    `Give a time such as ${exampleOf('time', units)}`,
  );
}

function percentage(text: string, refuse: Refuse): number {
  if (!/%\s*$/.test(text)) {
    refuse(
      'FIGURE_NOT_UNDERSTOOD',
      `${JSON.stringify(text)} is not a percentage`,
      'Write it with %, such as "time to 95 %"',
    );
  }
  const value = parseQuantity(text, 'fraction', { length: '', time: '' }, refuse);
  if (value > 0 && value < 1) return value;
  return refuse(
    'VALUE_OUT_OF_RANGE',
    `${text} is not between 0 % and 100 %`,
    'Give a percentage such as 95 %',
  );
}
