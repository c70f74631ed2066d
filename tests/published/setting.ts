import { readCase } from '../../src/case/read-case.ts';
import { answerLayout, type LayoutAnswer } from '../../src/run/answer-layout.ts';
import type { Answers } from '../../src/run/answers.ts';

/** What a check says of its problem; without `units` dimensionless, without `particle` D = 1. */
export interface Setting {
  readonly drawing: object;
  readonly walls: Readonly<Record<string, object>>;
  /** What each wall does; one left out reflects. */
  readonly kinds: Readonly<Record<string, unknown>>;
  readonly particle?: object;
  readonly units?: object;
  readonly report?: object;
}

/** Starts by name as a case file gives them. */
export type Starts = Readonly<Record<string, object>>;
export type Pins = Readonly<Record<string, readonly [x: number, y: number]>>;

/** Figures asked of starts, by the start's name. */
export type Figures = Readonly<Record<string, string>>;

/** The largest mesh a check may take. */
export const nodeLimit = 50_000;

/** The text of the case file of a setting, with one layout called `only`. */
export function caseText(
  setting: Setting,
  starts: Starts = {},
  pins: Pins = {},
  figures: Figures = {},
): string {
  return JSON.stringify({
    tarry: 1,
    title: 'Check against a published value',
    units: setting.units ?? 'none',
    drawing: setting.drawing,
    particle: setting.particle ?? { diffusion: 1 },
    walls: setting.walls,
    layouts: { only: setting.kinds },
    ...(Object.keys(starts).length > 0 && { starts }),
    ...(Object.keys(pins).length > 0 && { pins }),
    ...(Object.keys(figures).length > 0 && {
      asked: Object.entries(figures).map(([start, figure]) => ({ figure, start })),
    }),
    ...(setting.report && { report: setting.report }),
    accuracy: { nodes: nodeLimit },
  });
}

/** The whole way of an answer: case file text → Case → domain, mesh, fields → answers. */
export function solved(
  setting: Setting,
  starts: Starts = {},
  pins: Pins = {},
  figures: Figures = {},
): LayoutAnswer {
  const theCase = readCase(caseText(setting, starts, pins, figures), {
    readFile: (name: string): string => {
      throw new Error(`no check has files, yet ${name} was asked for`);
    },
  });
  return answerLayout(theCase, 'only', { clock: () => 0, at: 'in a test', command: 'none' });
}

/** Answers by the name of their start. */
export function answersByStart(answer: LayoutAnswer): ReadonlyMap<string, Answers> {
  return new Map(answer.answers.map((one) => [one.start, one]));
}
