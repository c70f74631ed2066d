import type { Asked, Case } from '../case/case.ts';
import type { Answer, AskedAnswer } from './answers.ts';

/** The figures of one layout and start that exist so far. */
export interface Figures {
  readonly mean: Answer;
  readonly shares: Readonly<Record<string, Answer>>;
}

/**
 * What the case asks of a start. Where the caller chose the start, that choice takes the place of the start in
 * everything asked (CASE.md, details).
 */
export function askedOf(theCase: Case, start: string, chosen: boolean): readonly Asked[] {
  return chosen ? theCase.asked : theCase.asked.filter((asked) => asked.start === start);
}

/** Answers what is asked, with the verdict against its limit; says what is not available yet. */
export function answerAsked(asked: readonly Asked[], figures: Figures): AskedAnswer[] {
  return asked.map((one) => answerOne(one, figures));
}

/** The answer to one figure, undefined where this version does not compute it. */
export function figureValue(asked: Asked, figures: Figures): Answer | undefined {
  const { figure } = asked;
  if (figure.kind === 'mean') return figures.mean;
  if (figure.kind === 'share' && figure.by === undefined) {
    // A wall that catches nothing in this layout has a share of 0 (CASE.md, details).
    return figures.shares[figure.wall] ?? { value: 0, kind: 'estimate' };
  }
  return undefined;
}

function answerOne(asked: Asked, figures: Figures): AskedAnswer {
  const answer = figureValue(asked, figures);
  const limit = asked.limit && { [asked.limit.kind]: asked.limit.value };
  if (!answer) return { figure: asked.text, ...limit, notAvailable: true };
  if (!asked.limit) return { figure: asked.text, value: answer.value };
  const margin =
    asked.limit.kind === 'under' ? asked.limit.value - answer.value : answer.value - asked.limit.value;
  return {
    figure: asked.text,
    value: answer.value,
    ...limit,
    verdict: margin >= 0 ? 'meets' : 'misses',
    margin: { value: margin },
  };
}
