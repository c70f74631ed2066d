import { expect, it } from 'vitest';
import { answersByStart, nodeLimit, type Pins, type Setting, type Starts, solved } from './setting.ts';

/** One number that a check asks for and what a source says it is. */
export interface Reading {
  readonly from: { readonly start: object } | { readonly pin: readonly [number, number] };
  /** The share of this wall; without it the mean exit time. */
  readonly shareOf?: string;
  /** What the source states, from the number answered; without it the number itself. */
  readonly derived?: (value: number) => number;
  readonly expected: number;
}

/** Every check is held to this relative error unless it says a smaller one. */
export const tolerance = 0.003;

type From = Reading['from'];

export const everywhere: From = { start: { evenIn: 'everywhere' } };
export const evenIn = (region: string): From => ({ start: { evenIn: region } });
export const point = (x: number, y: number): From => ({ start: { point: [x, y] } });
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
  for (const [label, { from }] of Object.entries(readings)) {
    if ('pin' in from) pins[label] = from.pin;
    else starts[label] = from.start;
  }
  return valuesOf(setting, readings, starts, pins);
}

function valuesOf(
  setting: Setting,
  readings: Readonly<Record<string, Reading>>,
  starts: Starts,
  pins: Pins,
): { readonly nodes: number; readonly values: ReadonlyMap<string, number> } {
  const answer = solved(setting, starts, pins);
  const byStart = answersByStart(answer);
  const anyStart = answer.answers[0];
  const values = new Map<string, number>();
  for (const [label, { from, shareOf }] of Object.entries(readings)) {
    const given = 'pin' in from ? anyStart?.pins[label] : byStart.get(label);
    const value = shareOf === undefined ? given?.mean.value : given?.shares[shareOf]?.value;
    if (value !== undefined) values.set(label, value);
  }
  return { nodes: anyStart?.mesh.nodes ?? Number.NaN, values };
}
