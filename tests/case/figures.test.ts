import { describe, expect, it } from 'vitest';
import { parseFigure } from '../../src/case/figures.ts';
import type { Refuse } from '../../src/case/units.ts';

const refuse: Refuse = (code, what, remedy) => {
  throw new Error(`${code}: ${what}. ${remedy}`);
};
const names = { exits: ['left pad', 'door by 3 h', 'lost'], regions: ['inlet bay'] };
const units = { length: 'mm', time: 'min' };
const parse = (text: string) => parseFigure(text, names, units, refuse);

describe('figures', () => {
  it.each([
    ['mean', { kind: 'mean' }],
    ['standard  deviation', { kind: 'standard deviation' }],
    [' median ', { kind: 'median' }],
    ['decay time', { kind: 'decay time' }],
    ['time to 95 %', { kind: 'time to', fraction: 0.95 }],
    ['time to 99.9%', { kind: 'time to', fraction: 0.999 }],
    ['share of left pad', { kind: 'share', wall: 'left pad' }],
    ['share of "left pad"', { kind: 'share', wall: 'left pad' }],
    ['share of left pad by 2 h', { kind: 'share', wall: 'left pad', by: 120 }],
    ['share of door by 3 h', { kind: 'share', wall: 'door by 3 h' }],
    ['share of door by 3 h by 4 h', { kind: 'share', wall: 'door by 3 h', by: 240 }],
    ['share of lost', { kind: 'share', wall: 'lost' }],
    ['time for 50 % to leave by left pad', { kind: 'time to leave by', wall: 'left pad', fraction: 0.5 }],
    ['still inside at 30 s', { kind: 'still inside', at: 0.5 }],
    ['time in inlet bay', { kind: 'time in', region: 'inlet bay' }],
  ])('reads %j', (text, figure) => {
    expect(parse(text)).toEqual(figure);
  });

  it.each([
    [
      'average',
      'FIGURE_NOT_UNDERSTOOD: the figure "average" is not understood. Give "mean", "standard deviation"',
    ],
    ['Mean time', 'FIGURE_NOT_UNDERSTOOD'],
    ['time to 95', 'is not a percentage. Write it with %, such as "time to 95 %"'],
    ['time to 100 %', 'is not between 0 % and 100 %'],
    ['time to 0 %', 'is not between 0 % and 100 %'],
    ['time to 99,9 %', 'Write "99.9 %"'],
    ['share of left pda', 'NAME_UNKNOWN: no wall is called "left pda". Did you mean "left pad"?'],
    ['share of left pad by lunch', 'does not start with a number'],
    ['share of left pad by 5 mm', '"mm" is length, but a time is time'],
    ['still inside at 0 s', 'is not after the start'],
    ['still inside at 20', 'has no unit'],
    ['time in outlet bay', 'no region is called "outlet bay". Did you mean "inlet bay"?'],
    ['time for half to leave by left pad', 'is not a percentage'],
    ['', 'FIGURE_NOT_UNDERSTOOD'],
  ])('refuses %j with what to write', (text, message) => {
    expect(() => parse(text)).toThrow(message);
  });

  it('takes bare numbers as times in a case without units', () => {
    const figure = parseFigure('still inside at 0.5', names, { length: '', time: '' }, refuse);
    expect(figure).toEqual({ kind: 'still inside', at: 0.5 });
  });
});
