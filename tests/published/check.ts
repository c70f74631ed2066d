import { expect, it } from 'vitest';
import type { Answers, Reading as AnswersReading } from '../../src/run/answers.ts';
import { answersByStart, nodeLimit, type Setting, solved } from './setting.ts';

/** One number that a check asks for and what a source says it is. */
export interface Reading {
  readonly from: { readonly start: object } | { readonly pin: readonly [number, number] };
  /** The share of this wall; without it and the next two the mean exit time. */
  readonly shareOf?: string;
  /** A figure as a case asks for it, of a start. */
  readonly figure?: string;
  /** Something else of a start's or pin's answers. */
  readonly readOff?: (given: Given) => number | undefined;
  /** What the source states, from the number answered; without it the number itself. */
  readonly derived?: (value: number) => number;
  readonly expected: number;
}

/** The answers of a start, or what there is of them for a pin. */
export type Given = AnswersReading & Partial<Answers>;

/** Every check is held to this relative error unless it says a smaller one. */
export const tolerance = 0.003;

type From = Reading['from'];

export const everywhere = { start: { evenIn: 'everywhere' } } satisfies From;
export const evenIn = (region: string) => ({ start: { evenIn: region } }) satisfies From;
export const point = (x: number, y: number) => ({ start: { point: [x, y] } }) satisfies From;
export const spot = (x: number, y: number, radius: number): From => ({ start: { spot: [x, y], radius } });
export const pin = (x: number, y: number): From => ({ pin: [x, y] });

export const mean = (from: From, expected: number, derived?: (value: number) => number): Reading => ({
  from,
  expected,
  ...(derived && { derived }),
});
export const share = (shareOf: string, from: From, expected: number): Reading => ({
  from,
  shareOf,
  expected,
});

/** A figure asked of a start, such as 'time to 95 %'. */
export const asked = (
  figure: string,
  from: Extract<From, { readonly start: object }>,
  expected: number,
  derived?: (value: number) => number,
): Reading => ({ from, figure, expected, ...(derived && { derived }) });

/** The slowest rate of leaving, by the decay time. */
export const slowestRate = (expected: number): Reading =>
  asked('decay time', everywhere, expected, (time) => 1 / time);

export const readOff = (
  from: From,
  expected: number,
  reader: (given: Given) => number | undefined,
): Reading => ({ from, expected, readOff: reader });

/**
 * A named test: the setting goes the whole way from case file text to answers, and every reading is to be within
 * `within` on at most {@link nodeLimit} nodes. With `--reporter=verbose` the errors met are printed.
 *
 * @param id of the check in tests/data/checks.json
 * @param sentence what is claimed, with its source in brackets
 * @param within relative error allowed
 */
export function check(
  id: string,
  sentence: string,
  setting: Setting,
  readings: Readonly<Record<string, Reading>>,
  within: number = tolerance,
): void {
  it(`${id}: ${sentence}`, async ({ annotate }) => {
    const { nodes, values } = read(setting, readings);
    const errors = Object.entries(readings).map(([label, { expected, derived }]) => {
      const value = values.get(label) ?? Number.NaN;
      const relative = Math.abs((derived ? derived(value) : value) / expected - 1);
      return { label, relative };
    });
    await annotate(`${nodes} nodes; ${errors.map(inWords).join(', ')}`);
    expect(errors.length).toBeGreaterThan(0);
    expect(errors.filter(({ relative }) => !(relative <= within)).map(inWords)).toEqual([]);
    expect(nodes).toBeLessThanOrEqual(nodeLimit);
  });
}

function inWords({ label, relative }: { label: string; relative: number }): string {
  return `${label} off by ${(100 * relative).toPrecision(2)} %`;
}

/** The numbers answered, by label, and the size of the mesh. */
export function read(
  setting: Setting,
  readings: Readonly<Record<string, Reading>>,
): { readonly nodes: number; readonly values: ReadonlyMap<string, number> } {
  const starts: Record<string, object> = {};
  const pins: Record<string, readonly [number, number]> = {};
  const figures: Record<string, string> = {};
  for (const [label, { from, figure }] of Object.entries(readings)) {
    if ('pin' in from) pins[label] = from.pin;
    else starts[label] = from.start;
    if (figure !== undefined) figures[label] = figure;
  }
  const answer = solved(setting, starts, pins, figures);
  const byStart = answersByStart(answer);
  const anyStart = answer.answers[0];
  const values = new Map<string, number>();
  for (const [label, reading] of Object.entries(readings)) {
    const given = 'pin' in reading.from ? anyStart?.pins[label] : byStart.get(label);
    const value = given && numberOf(given, reading);
    if (typeof value === 'number') values.set(label, value);
  }
  return { nodes: anyStart?.mesh.nodes ?? Number.NaN, values };
}

function numberOf(given: Given, { shareOf, figure, readOff: reader }: Reading): number | null | undefined {
  if (reader) return reader(given);
  if (figure !== undefined) return given.asked?.[0]?.value;
  return shareOf === undefined ? given.mean.value : given.shares[shareOf]?.value;
}
