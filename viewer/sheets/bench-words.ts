import type { LayoutView } from '../../src/service/contract.ts';
import { type Stretch, stretchLength } from '../plan/stretches.ts';
import type { Answers } from '../words/answers.ts';
import type { DisplayUnit } from '../words/display-unit.ts';
import { decimalsFor, fixedText, numberText, pointText, withUnit } from '../words/number-text.ts';
import { wholePercents } from '../words/shares.ts';

/** What the bench says in words: of a stretch, and of the whole plan for those who do not see it. */

export interface BenchWords {
  readonly layout: LayoutView;
  readonly shown: Answers;
  readonly time: DisplayUnit;
  readonly lengthUnit: string;
  readonly letter: (wall: string) => string;
}

const KINDS = { absorbing: 'catches', partlyAbsorbing: 'catches weakly', reflecting: 'turns back' } as const;

const capital = (words: string): string => words.charAt(0).toUpperCase() + words.slice(1);

function percentsByName(shown: Answers): Map<string, number> {
  const percents = wholePercents(shown.shares.map(({ share }) => share.value));
  return new Map(shown.shares.map(({ name }, i) => [name, percents[i] ?? 0]));
}

/** 'Outer south pad (u): 0.631 to 0.761 mm' and '0.130 mm long, 13 % caught'. */
export function stretchWords(data: BenchWords, stretch: Stretch): [string, string] {
  const { wall, loop } = stretch;
  const name =
    wall.name === undefined ? `wall on ${loop.name}` : `${capital(wall.name)} (${data.letter(wall.name)})`;
  const decimals = decimalsFor(loop.length, 4);
  const whole = stretch.whole
    ? `the whole of ${loop.name}`
    : `${fixedText(wall.from, decimals)} to ${withUnit(fixedText(wall.to, decimals), data.lengthUnit)}`;
  const length = withUnit(fixedText(stretchLength(wall, loop), decimals), data.lengthUnit);
  const percent = wall.name === undefined ? undefined : percentsByName(data.shown).get(wall.name);
  const parts = [`${length} long`, KINDS[wall.kind]];
  if (wall.kappa !== undefined) parts.push(`κ = ${wall.kappa}`);
  if (percent !== undefined)
    parts.push(`${percent}\u00a0% caught${isShared(data.layout, wall.name) ? ' on all its stretches' : ''}`);
  return [`${name}: ${whole}`, parts.join(', ')];
}

function isShared(layout: LayoutView, name: string | undefined): boolean {
  return layout.walls.filter((wall) => wall.name === name && wall.kind !== 'reflecting').length > 1;
}

/** One sentence about the plan. */
export function planSummary(data: BenchWords): string {
  const { layout, time } = data;
  const { low, high } = layout.bounds;
  const size = Math.max(high[0] - low[0], high[1] - low[1]);
  const longest = withUnit(numberText(layout.longest.value * time.factor), time.name);
  const place = pointText(layout.longest.at, size, data.lengthUnit);
  return `Plan of ${layout.layout}: mean time until caught from every point. The longest is ${longest}, at ${place}. Arrow keys read it point by point; the tables below say the rest.`;
}
