import type { Asked, Case } from '../case/case.ts';
import type { Answers } from './answers.ts';
import { askedOf, figureValue } from './asked.ts';

/**
 * Adds to each answer how far its first asked figure (the mean, where nothing is asked) is from the reference
 * layout's for the same start. Left out where this version does not compute the figure.
 *
 * @param chosenStart true where the caller chose the start, see {@link askedOf}
 */
export function withDifferences(
  theCase: Case,
  all: readonly Answers[],
  chosenStart: boolean,
): readonly Answers[] {
  return all.map((answers) => {
    const reference = all.find((one) => one.layout === theCase.reference && one.start === answers.start);
    const first = askedOf(theCase, answers.start, chosenStart)[0];
    const here = firstFigure(first, answers);
    const there = reference && firstFigure(first, reference);
    if (here === undefined || there === undefined) return answers;
    return {
      ...answers,
      difference: { to: theCase.reference, value: here - there, kind: 'estimate' as const },
    };
  });
}

function firstFigure(first: Asked | undefined, answers: Answers): number | undefined {
  return first ? figureValue(first, answers)?.value : answers.mean.value;
}
