import { expect, it } from 'vitest';
import { readCase } from '../../src/case/read-case.ts';
import { answerLines } from '../../src/cli/answer-lines.ts';
import { answerLayout } from '../../src/run/answer-layout.ts';

/** What `tarry solve` prints of a strip 2 mm long, D = 1 mm²/s, both layouts solved. */
function printed(particle: object, asked: readonly object[] = []): string {
  const theCase = readCase(
    JSON.stringify({
      tarry: 1,
      title: 'strip',
      units: { length: 'mm', time: 's' },
      drawing: { outline: { rectangle: [0, 0, 2, 0.5] } },
      particle: { diffusion: '1 mm^2/s', ...particle },
      asked,
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
  expect(text).toMatch(/what rules each layout, L = 2\.000 mm\n +layout +κL\/D +rounding +times from\n/);
  expect(text).toMatch(/\n +coated +6\.00 +\d/);
  expect(text).toMatch(/\n +open +\d\.\d+×10⁻/);
  expect(text).not.toMatch(/With a flow/);
});

it('a column of times is in the unit of the limit that it is read against', () => {
  // One absorbing end: L²/(3D) = 4/3 s [Redner 2001, chapter 2].
  const text = printed({}, [{ figure: 'mean', under: '2500 ms' }]);
  expect(text).toMatch(/\n +open +1\.333 s +e +meets, 1\.167 s to spare/);
  expect(printed({}, [{ figure: 'mean', under: '0.9 s' }])).toMatch(
    /\n +open +1\u202f333 ms +e +misses by 433\.\d ms/,
  );
});

it('with drift and loss come Péclet number, the share lost, the caution about flow, and a mean of its own name', () => {
  const text = printed({ drift: { x: '-4 mm/s', y: 0 }, loss: '5 1/s' });
  expect(text).toMatch(/layout +vL\/D +κL\/D +cL²\/D +rounding +times from\n/);
  expect(text).toMatch(/\n +coated +8\.00 +6\.00 +20\.0 +/);
  expect(text).toMatch(/\n +open +left \d[\d.]* %, lost \d[\d.]* %\n/);
  expect(text).toMatch(/\nmean time until caught or lost, released evenly everywhere\n/);
  expect(text).toMatch(/With a flow/);
});

it('a warning of the answers is printed once for each layout, with its name', () => {
  const flow = { x: { expression: '-y', unit: 'mm/s' }, y: { expression: 'x', unit: 'mm/s' } };
  const text = printed({ drift: flow }).replaceAll('\n', ' ');
  expect(text.match(/Warning: layout "open": not reversible/g)).toHaveLength(1);
  expect(text.match(/Warning: layout "coated": not reversible/g)).toHaveLength(1);
});

/** The headings of the tables of a strip left by a door on its left, with a pad on its right in one layout. */
function headings(asked: readonly object[], parts: object = {}): string[] {
  const theCase = readCase(
    JSON.stringify({
      tarry: 1,
      units: { length: 'mm', time: 's' },
      drawing: { outline: { rectangle: [0, 0, 2, 0.5] }, regions: { bay: { rectangle: [0, 0, 1, 1] } } },
      particle: { diffusion: '1 mm^2/s' },
      walls: {
        door: { on: 'outline', where: 'x == 0', as: 'opening' },
        pad: { on: 'outline', where: 'x == 2' },
      },
      layouts: { open: { door: 'absorbing' } },
      asked,
      ...parts,
    }),
  );
  const lines = answerLines(theCase, theCase.layouts, [], undefined);
  return lines.filter((line) => line.endsWith(', released evenly everywhere')).slice(0, asked.length);
}

it('what has left by openings, is caught by pads or is lost is said so, both where there are both', () => {
  const asked = [{ figure: 'time to 95 %' }, { figure: 'mean' }, { figure: 'median', counts: 'caught' }];
  const release = ', released evenly everywhere';
  const both = { layouts: { open: { door: 'absorbing', pad: 'absorbing' } } };
  const losing = { particle: { diffusion: '1 mm^2/s', loss: '1 1/s' } };
  expect(headings(asked)).toEqual(
    ['95 % has left', 'mean time until it has left', 'half has left'].map((words) => words + release),
  );
  expect(headings(asked, both)).toEqual(
    ['95 % caught or has left', 'mean time until caught or left', 'half caught or has left'].map(
      (words) => words + release,
    ),
  );
  expect(headings(asked, { ...both, ...losing })).toEqual(
    [
      '95 % caught or has left or lost',
      'mean time until caught, left or lost',
      'half caught or has left',
    ].map((words) => words + release),
  );
});

it('every other figure has its heading', () => {
  const words = {
    'standard deviation': 'standard deviation of the time until it has left',
    'share of door by 5 s': 'left by door by 5 s',
    'share of pad': 'caught at pad',
    'time for 12.5 % to leave by door': '12.5 % left by door',
    'still inside at 5 s': 'still free at 5 s',
    'time in bay': 'mean time spent in bay',
    'decay time': 'decay time',
  };
  const asked = Object.keys(words).map((figure) => ({ figure }));
  expect(headings(asked)).toEqual(Object.values(words).map((one) => `${one}, released evenly everywhere`));
});

it('a time that is never reached says how many ever get there, and the verdict follows', () => {
  const theCase = readCase(
    JSON.stringify({
      tarry: 1,
      units: 'none',
      drawing: { outline: { rectangle: [0, 0, 1, 0.25] } },
      particle: { diffusion: 1 },
      walls: { left: { on: 'outline', where: 'x == 0' }, right: { on: 'outline', where: 'x == 1' } },
      layouts: { both: { left: 'absorbing', right: 'absorbing' } },
      starts: { quarter: { point: [0.25, 0.1] } },
      asked: [
        { figure: 'time for 30 % to leave by right', under: 5 },
        { figure: 'time for 30 % to leave by right', atLeast: 5 },
      ],
    }),
  );
  const { answers } = answerLayout(theCase, 'both', { clock: () => 0, at: '', command: '' });
  const text = answerLines(theCase, theCase.layouts, answers, undefined).join('\n');
  // Gambler's ruin: a quarter of those from x = ¼ end on the right [Redner 2001, chapter 2].
  expect(text).toMatch(/\n +both +never: at most 25\.00 % +misses\n/);
  expect(text).toMatch(/\n +both +never: at most 25\.00 % +meets\n/);
});
