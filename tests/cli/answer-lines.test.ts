import { expect, it } from 'vitest';
import { readCase } from '../../src/case/read-case.ts';
import { answerLines } from '../../src/cli/answer-lines.ts';
import { answerLayout } from '../../src/run/answer-layout.ts';

/** What `tarry solve` prints of a strip 2 mm long, D = 1 mm²/s, both layouts solved. */
function printed(particle: object): string {
  const theCase = readCase(
    JSON.stringify({
      tarry: 1,
      title: 'strip',
      units: { length: 'mm', time: 's' },
      drawing: { outline: { rectangle: [0, 0, 2, 0.5] } },
      particle: { diffusion: '1 mm^2/s', ...particle },
      walls: { left: { on: 'outline', where: 'x == 0' }, right: { on: 'outline', where: 'x == 2' } },
      layouts: {
        open: { left: 'absorbing' },
        coated: { left: 'absorbing', right: { partlyAbsorbing: '3 mm/s' } },
      },
    }),
  );
  const answers = theCase.layouts.flatMap(
    ({ name }) => answerLayout(theCase, name, { clock: () => 0, at: '', command: '' }).answers,
  );
  return answerLines(theCase, theCase.layouts, answers, undefined).join('\n');
}

it('the numbers that rule each layout are printed, a column for each kind that there is', () => {
  const text = printed({});
  expect(text).toMatch(/what rules each layout, L = 2\.000 mm\n +layout +κL\/D +rounding\n/);
  expect(text).toMatch(/\n +coated +6\.00 +\d/);
  expect(text).toMatch(/\n +open +\d\.\d+×10⁻/);
  expect(text).not.toMatch(/With a flow/);
});

it('with drift and loss come Péclet number, the share lost, the caution about flow, and a mean of its own name', () => {
  const text = printed({ drift: { x: '-4 mm/s', y: 0 }, loss: '5 1/s' });
  expect(text).toMatch(/layout +vL\/D +κL\/D +cL²\/D +rounding\n/);
  expect(text).toMatch(/\n +coated +8\.00 +6\.00 +20\.0 +/);
  expect(text).toMatch(/\n +open +left \d[\d.]* %, lost \d[\d.]* %\n/);
  expect(text).toMatch(/mean time to leave or be lost, released evenly everywhere/);
  expect(text).toMatch(/With a flow/);
});

it('a warning of the answers is printed once for each layout, with its name', () => {
  const flow = { x: { expression: '-y', unit: 'mm/s' }, y: { expression: 'x', unit: 'mm/s' } };
  const text = printed({ drift: flow }).replaceAll('\n', ' ');
  expect(text.match(/Warning: layout "open": not reversible/g)).toHaveLength(1);
  expect(text.match(/Warning: layout "coated": not reversible/g)).toHaveLength(1);
});
