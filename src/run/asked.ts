import type { Asked, Case } from '../case/case.ts';
import type { AskedAnswer, TimeAnswer } from './answers.ts';

/**
 * What the case asks of a start. Where the caller chose the start, that choice takes the place of the start in
 * everything asked (CASE.md, details).
 */
export function askedOf(theCase: Case, start: string, chosen: boolean): readonly Asked[] {
  return chosen ? theCase.asked : theCase.asked.filter((asked) => asked.start === start);
}

/** An answer to what is asked, with the verdict against its limit. */
export function answerAsked(asked: Asked, answer: TimeAnswer | undefined): AskedAnswer {
  const { text, limit, counts } = asked;
  const stated = {
    figure: text,
    ...(counts && { counts }),
    ...(limit && { [limit.kind]: limit.value }),
  };
  if (!answer) return stated;
  // Never is later than any limit.
  if (answer.value === null) {
    return { ...stated, ...answer, ...(limit && { verdict: limit.kind === 'under' ? 'misses' : 'meets' }) };
  }
  if (!limit) return { ...stated, ...answer };
  const margin = limit.kind === 'under' ? limit.value - answer.value : answer.value - limit.value;
  return { ...stated, ...answer, verdict: margin >= 0 ? 'meets' : 'misses', margin: { value: margin } };
}
