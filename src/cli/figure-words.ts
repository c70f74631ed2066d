import type { Asked, Case, Figure, Layout } from '../case/case.ts';
import { canBeLost } from '../case/read-particle.ts';

/** How a particle ends, in the words of a case: caught by pads, left by openings, lost on the way. */
interface Ends {
  /** 'caught', 'has left', 'caught or has left', with loss '… or lost'. */
  readonly gone: string;
  /** 'caught', 'it has left', 'caught, left or lost', as after 'until'. */
  readonly until: string;
}

/**
 * What an asked figure says, as the heading of its table: '95 % caught'.
 *
 * @param layouts those shown: a wall that catches in none of them has no say
 */
export function figureWords(theCase: Case, layouts: readonly Layout[], asked: Asked | undefined): string {
  const ends = endsOf(theCase, layouts, asked?.counts);
  const figure: Figure = asked?.figure ?? { kind: 'mean' };
  switch (figure.kind) {
    case 'mean':
      return `mean time until ${ends.until}`;
    case 'standard deviation':
      return `standard deviation of the time until ${ends.until}`;
    case 'median':
      return `half ${ends.gone}`;
    case 'time to':
      return `${percent(figure.fraction)} ${ends.gone}`;
    case 'share':
      return endWords(theCase, figure.wall) + byWords(asked?.text, figure);
    case 'time to leave by':
      return `${percent(figure.fraction)} ${endWords(theCase, figure.wall)}`;
    case 'still inside':
      return asked?.text.replace(/^still inside/, 'still free') ?? 'still free';
    case 'time in':
      return `mean time spent in ${figure.region}`;
    case 'decay time':
      return 'decay time';
  }
}

/** The time as it was written in the case. */
function byWords(text: string | undefined, figure: Extract<Figure, { kind: 'share' }>): string {
  if (figure.by === undefined || text === undefined) return '';
  return text.slice(text.lastIndexOf(' by '));
}

function endWords({ walls }: Case, name: string): string {
  if (name === 'lost') return 'lost';
  const wall = walls.find((one) => one.name === name);
  return wall?.as === 'opening' ? `left by ${name}` : `caught at ${name}`;
}

function endsOf(theCase: Case, layouts: readonly Layout[], counts: 'caught' | undefined): Ends {
  const catching = layouts.flatMap(({ assignments }) =>
    assignments.filter(({ kind }) => kind.kind === 'absorbing' || kind.kind === 'partlyAbsorbing'),
  );
  const hasFloor = layouts.some(({ floors }) => (floors?.length ?? 0) > 0);
  const opens = catching.some(({ wall }) => wall.as === 'opening');
  const loses = canBeLost(theCase.particle) && counts !== 'caught';
  const catches = hasFloor || catching.some(({ wall }) => wall.as === 'pad') || (!opens && !loses);
  const ways = [...(catches ? ['caught'] : []), ...(opens ? ['has left'] : []), ...(loses ? ['lost'] : [])];
  return {
    gone: ways.join(' or '),
    until: ways.length === 1 && opens ? 'it has left' : listed(ways.map((way) => way.replace('has ', ''))),
  };
}

function listed(words: readonly string[]): string {
  const last = words.at(-1) ?? '';
  return words.length < 2 ? last : `${words.slice(0, -1).join(', ')} or ${last}`;
}

function percent(fraction: number): string {
  return `${Number((100 * fraction).toPrecision(12))} %`;
}
