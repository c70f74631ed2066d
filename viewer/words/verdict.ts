import type { Asked, Figure } from './answers.ts';
import type { DisplayUnit } from './display-unit.ts';
import { givenText, numberText, withUnit } from './number-text.ts';

/** What is said of a figure and of what was asked of it. 'Surely' only for a proven bracket. */

/** Whether a figure is a part of the whole (a share, what is still inside) and not a time. */
export function isShare(figure: string): boolean {
  return /^(share of|still inside)/.test(figure);
}

/** The figure in the words of the page. */
export function figureWords(figure: string): string {
  if (figure === 'mean') return 'mean time until caught';
  if (figure === 'median') return 'half caught within';
  const share = /^share of (.+?)( by .+)?$/.exec(figure);
  if (share !== null) return `caught at ${share[1]}${share[2] ?? ''}`;
  const percent = /^time to (.+)$/.exec(figure);
  if (percent !== null) return `${percent[1]} caught within`;
  const leave = /^time for (.+?) to leave by (.+)$/.exec(figure);
  if (leave !== null) return `${leave[1]} caught at ${leave[2]} within`;
  return figure.replace(/^still inside/, 'still free').replace(/^time in/, 'mean time spent in');
}

/** 'never: at most 25 %' in place of a time that is never reached. */
export function neverText(atMost: number): string {
  return `never: at most ${withUnit(numberText(100 * atMost), '%')}`;
}

/** A value of a figure with its unit. */
export function valueText(figure: string, value: number, time: DisplayUnit): string {
  return isShare(figure)
    ? withUnit(numberText(100 * value), '%')
    : withUnit(numberText(value * time.factor), time.name);
}

function limitText(figure: string, limit: number, time: DisplayUnit): string {
  return isShare(figure)
    ? withUnit(givenText(100 * limit), '%')
    : withUnit(givenText(limit * time.factor), time.name);
}

/** A distance between two values: percentage points for shares. */
function marginText(figure: string, margin: number, time: DisplayUnit): string {
  const size = Math.abs(margin);
  if (!isShare(figure)) return withUnit(numberText(size * time.factor, 2), time.name);
  const points = numberText(100 * size, 2);
  return `${points} percentage ${points === '1.0' ? 'point' : 'points'}`;
}

export interface VerdictWords {
  /** 'the limit is 80 min' */
  readonly limit: string;
  /** 'Meets it by 48 min or more.' */
  readonly verdict: string;
  /** 'Estimated, not proven: no bracket yet.'; absent when the verdict is proven. */
  readonly beneath?: string;
}

/**
 * The verdict on one asked figure, or nothing where no limit was set or nothing was computed. The margin is taken
 * from the near end of the bracket, from the value itself where there is none.
 */
export function verdictWords(
  asked: Asked,
  bracket: Figure | undefined,
  time: DisplayUnit,
): VerdictWords | undefined {
  const limit = asked.under ?? asked.atLeast;
  const value = asked.value ?? (asked.never === undefined ? undefined : Number.POSITIVE_INFINITY);
  if (limit === undefined || value === undefined) return undefined;
  const under = asked.under !== undefined;
  const low = bracket?.low ?? value;
  const high = bracket?.high ?? value;
  const proven = bracket?.proven === true;
  const limitWords = `must be ${under ? 'under' : 'at least'} ${limitText(asked.figure, limit, time)}`;
  const hasBracket = bracket?.low !== undefined && bracket.high !== undefined;
  const beneath = proven
    ? {}
    : { beneath: hasBracket ? 'Estimated, not proven.' : 'Estimated, not proven: there is no bracket yet.' };
  if (hasBracket && low < limit && high > limit) {
    return { limit: limitWords, verdict: 'Open: narrow the bracket.', ...beneath };
  }
  const meets = under ? value < limit : value >= limit;
  if (value === Number.POSITIVE_INFINITY) {
    return {
      limit: limitWords,
      verdict: meets ? 'Meets it: never reached.' : 'Misses it: never reached.',
      ...beneath,
    };
  }
  // The near end: the one on the limit's side of the bracket.
  const near = meets === under ? high : low;
  const margin = marginText(asked.figure, limit - near, time);
  const more = hasBracket ? ' or more' : '';
  const said = meets ? `Meets it by ${margin}${more}.` : `Misses it by ${margin}${more}.`;
  return { limit: limitWords, verdict: said, ...beneath };
}

/** How a layout stands to the reference: 'about 8.2 min quicker than two end pads (ref)'. */
export function differenceWords(
  difference: { readonly to: string; readonly value: number; readonly proven: boolean },
  time: DisplayUnit,
): string {
  const size = withUnit(numberText(Math.abs(difference.value) * time.factor, 2), time.name);
  if (difference.value === 0) return `the same as ${difference.to} (ref)`;
  const way = difference.value < 0 ? 'quicker' : 'slower';
  return `${difference.proven ? 'surely ' : 'about '}${size} ${way} than ${difference.to} (ref)`;
}

/** 'surely 28.1 to 29.1 min', 'estimated 28.1 to 29.1 min, not proven', or that there is none. */
export function bracketWords(figure: Figure, time: DisplayUnit): string {
  if (figure.low === undefined || figure.high === undefined) return 'none yet: the figures are estimates';
  const range = `${numberText(figure.low * time.factor)} to ${withUnit(numberText(figure.high * time.factor), time.name)}`;
  return figure.proven ? `surely ${range}` : `estimated ${range}, not proven`;
}
