import { readCase } from '../../src/case/read-case.ts';
import { answerLayout, type LayoutAnswer } from '../../src/run/answer-layout.ts';
import type { Answers } from '../../src/run/answers.ts';

/** A case without units in the square 0 < x, y < 1; left and right sides named, the left absorbing. */
export const unitSquare = (parts: Readonly<Record<string, unknown>> = {}): Record<string, unknown> => ({
  tarry: 1,
  units: 'none',
  drawing: { outline: { rectangle: [0, 0, 1, 1] } },
  particle: { diffusion: 1 },
  walls: { left: { on: 'outline', where: 'x == 0' }, right: { on: 'outline', where: 'x == 1' } },
  layouts: { only: { left: 'absorbing' } },
  ...parts,
});

/** Solves one layout of a case given as an object. */
export function solveCase(raw: object, layout = 'only'): LayoutAnswer {
  const theCase = readCase(JSON.stringify(raw));
  return answerLayout(theCase, layout, { clock: () => 0, at: 'in a test', command: 'none' });
}

/** The first start's answers. */
export function firstAnswers(raw: object, layout?: string): Answers {
  const [answers] = solveCase(raw, layout).answers;
  if (!answers) throw new Error('the case has no start');
  return answers;
}
