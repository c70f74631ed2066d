import type { Answers } from './answers.ts';

/**
 * Adds to each answer how far its first asked figure (the mean, where nothing is asked) is from the reference
 * layout's for the same start. Left out where either is never reached or has no value.
 *
 * @param reference name of the reference layout
 */
export function withDifferences(reference: string, all: readonly Answers[]): readonly Answers[] {
  return all.map((answers) => {
    const standard = all.find((one) => one.layout === reference && one.start === answers.start);
    const here = firstFigure(answers);
    const there = standard && firstFigure(standard);
    if (typeof here !== 'number' || typeof there !== 'number') return answers;
    return { ...answers, difference: { to: reference, value: here - there, kind: 'estimate' as const } };
  });
}

function firstFigure({ asked, mean }: Answers): number | null | undefined {
  const [first] = asked;
  return first ? first.value : mean.value;
}
