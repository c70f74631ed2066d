import { expect, it } from 'vitest';
import { placeText, readPlace } from '../../viewer/page/place.ts';
import { catchingStretches } from '../../viewer/plan/stretches.ts';
import { askedText, figureRows, keyFigure, startWords } from '../../viewer/readings/readings.ts';
import { stretchWords } from '../../viewer/sheets/bench-words.ts';
import { nearGroups } from '../../viewer/sheets/case-preview.ts';
import { proposedForm, rolesFor, setRole, unitOf, uploadOf } from '../../viewer/sheets/drawn-case.ts';
import { sentenceOf } from '../../viewer/sheets/refused-sheet.ts';
import { readAnswers } from '../../viewer/words/answers.ts';
import { Letters } from '../../viewer/words/letters.ts';
import { bracketWords, differenceWords, figureWords, verdictWords } from '../../viewer/words/verdict.ts';
import { FAKE_CASE, fakeLayout } from './support/fake-case.ts';

const MINUTES = { name: 'min', factor: 1 / 60 };
const proven = (value: number, low: number, high: number) => ({ value, low, high, proven: true });
const asked = (value: number, limits: object) => ({
  figure: 'time to 95 %',
  value,
  ...limits,
});

it('a limit that is met or missed without a bracket is said to be estimated, not proven', () => {
  const meets = verdictWords(asked(1920, { under: 4800 }), undefined, MINUTES);
  expect(meets).toEqual({
    limit: 'must be under 80\u00a0min',
    verdict: 'Meets it by 48\u00a0min.',
    beneath: 'Estimated, not proven: there is no bracket yet.',
  });
  const misses = verdictWords(asked(5160, { under: 4800 }), undefined, MINUTES);
  expect(misses?.verdict).toBe('Misses it by 6.0\u00a0min.');
});

it('a proven margin is taken from the near end of the bracket and stands alone', () => {
  const meets = verdictWords(asked(1920, { under: 4800 }), proven(1920, 1900, 1980), MINUTES);
  expect(meets).toEqual({ limit: 'must be under 80\u00a0min', verdict: 'Meets it by 47\u00a0min or more.' });
  const misses = verdictWords(asked(5200, { under: 4800 }), proven(5200, 5160, 5300), MINUTES);
  expect(misses?.verdict).toBe('Misses it by 6.0\u00a0min or more.');
});

it('a bracket on both sides of the limit leaves the question open', () => {
  const open = verdictWords(asked(4820, { under: 4800 }), proven(4820, 4700, 4900), MINUTES);
  expect(open?.verdict).toBe('Open: narrow the bracket.');
});

it('a share is measured in percentage points, from its near end', () => {
  const share = { figure: 'share of left pad', value: 0.61, atLeast: 0.4 };
  expect(verdictWords(share, undefined, MINUTES)?.verdict).toBe('Meets it by 21 percentage points.');
  expect(verdictWords(share, proven(0.61, 0.6, 0.62), MINUTES)?.verdict).toBe(
    'Meets it by 20 percentage points or more.',
  );
  expect(verdictWords({ ...share, value: 0.3 }, proven(0.3, 0.28, 0.35), MINUTES)?.verdict).toBe(
    'Misses it by 5.0 percentage points or more.',
  );
});

it('nothing is said of a figure without a limit or without a value', () => {
  expect(verdictWords(asked(100, {}), undefined, MINUTES)).toBeUndefined();
  expect(verdictWords({ figure: 'median', under: 5 }, undefined, MINUTES)).toBeUndefined();
});

it('surely is said of proven brackets only', () => {
  expect(bracketWords(proven(1720, 1686, 1746), MINUTES)).toBe('surely 28.1 to 29.1\u00a0min');
  const guessed = { value: 1720, low: 1686, high: 1746, proven: false };
  expect(bracketWords(guessed, MINUTES)).toBe('estimated 28.1 to 29.1\u00a0min, not proven');
  expect(bracketWords({ value: 1720, proven: false }, MINUTES)).not.toMatch(/surely/);
  expect(differenceWords({ to: 'B', value: -492, proven: false }, MINUTES)).toBe(
    'about 8.2\u00a0min quicker than B (ref)',
  );
  expect(differenceWords({ to: 'B', value: 492, proven: true }, MINUTES)).toMatch(/^surely .* slower than B/);
});

it('figures are named in the words of the page', () => {
  expect(figureWords('mean')).toBe('mean time until caught');
  expect(figureWords('time to 95 %')).toBe('95 % caught within');
  expect(figureWords('share of left pad')).toBe('caught at left pad');
  expect(figureWords('share of left pad by 20 min')).toBe('caught at left pad by 20 min');
  expect(figureWords('median')).toBe('half caught within');
  expect(figureWords('time for 50 % to leave by left pad')).toBe('50 % caught at left pad within');
  expect(figureWords('still inside at 20 min')).toBe('still free at 20 min');
  expect(figureWords('time in inlet bay')).toBe('mean time spent in inlet bay');
  expect(figureWords('decay time')).toBe('decay time');
});

it('an answer is read with what it has; one without a mean is not an answer', () => {
  const answer = readAnswers({
    start: 'bay',
    mean: { value: 5, kind: 'guaranteed', low: 4, high: 6 },
    shares: { a: { value: 1, kind: 'estimate' } },
    asked: [
      { figure: 'median', under: 3 },
      { figure: 'mean', value: 5, under: 9, verdict: 'meets' },
    ],
    warnings: ['one', { what: 'two' }],
  });
  expect(answer.mean.proven).toBe(true);
  expect(answer.shares[0]?.share.proven).toBe(false);
  expect(answer.warnings).toEqual(['one', 'two']);
  expect(keyFigure(answer).figure).toBe('mean');
  expect(() => readAnswers({ start: 'bay' })).toThrow(TypeError);
});

const estimate = (value: number) => ({ value, kind: 'estimate' });
const timed = readAnswers({
  start: 'bay',
  mean: estimate(1716),
  sd: estimate(1542),
  times: { '50 %': estimate(1296), '95 %': { value: 4758, low: 4602, high: 4932, kind: 'guaranteed' } },
  decayTime: estimate(1008 / Math.LN2),
  pins: { one: { mean: estimate(60), sd: estimate(120), times: { '95 %': estimate(240) } } },
  asked: [
    { figure: 'time to 95 %', value: 4758, low: 4602, high: 4932, kind: 'guaranteed', under: 4800 },
    { figure: 'mean', ...estimate(1716), under: 3600, verdict: 'meets' },
    { figure: 'time for 30 % to leave by left', value: null, never: { atMost: 0.25 }, under: 60 },
  ],
});

it('the key figure is the first asked, with its own bracket; mean, spread, half and what comes later stand beneath', () => {
  const key = keyFigure(timed);
  expect(key).toMatchObject({ figure: 'time to 95 %', value: 4758, bracket: { proven: true } });
  expect(verdictWords(key, key.bracket, MINUTES)?.verdict).toBe('Open: narrow the bracket.');
  expect(figureRows(timed, key, MINUTES)).toEqual([
    ['Mean time until caught', '28.6\u00a0min'],
    ['Standard deviation', '25.7\u00a0min'],
    ['Half caught within', '21.6\u00a0min'],
    ['Later on, halves every', '16.8\u00a0min'],
    ['\u2003must be under 60\u00a0min', 'Meets it by 31\u00a0min'],
    ['30 % caught at left within', 'never: at most 25.0\u00a0%'],
    ['\u2003must be under 1\u00a0min', 'Misses it: never reached'],
  ]);
  expect(timed.pins[0]).toMatchObject({
    mean: { value: 60 },
    deviation: { value: 120 },
    most: { value: 240 },
  });
});

it('a time that is never reached is the key figure where it is asked first', () => {
  const never = { figure: 'time to 95 %', never: 0.6, atLeast: 60 };
  expect(keyFigure({ ...timed, asked: [never] })).toBe(never);
  expect(askedText(never, MINUTES)).toBe('never: at most 60.0\u00a0%');
  expect(verdictWords(never, undefined, MINUTES)?.verdict).toBe('Meets it: never reached.');
});

it('guaranteed without both ends of a bracket is not proven', () => {
  expect(readAnswers({ start: 's', mean: { value: 5, kind: 'guaranteed' } }).mean.proven).toBe(false);
});

it('letters are the first free one of the name and stay with it', () => {
  const letters = new Letters();
  expect(['south pad', 'slit', 'north pad', 'süd'].map((name) => letters.of(name))).toEqual([
    's',
    'l',
    'n',
    'd',
  ]);
  expect(letters.of('south pad')).toBe('s');
});

it('more walls than letters still have one each', () => {
  const letters = new Letters();
  const all = Array.from({ length: 40 }, (_, i) => letters.of(`pad ${i}`));
  expect(new Set(all).size).toBe(40);
});

it('a stretch is said with its letter, extent, length, kind and share', () => {
  const layout = fakeLayout('four short pads', 'inlet bay');
  const shown = readAnswers(layout.answers[0]);
  const letters = new Letters();
  const stretches = catchingStretches(layout);
  expect(stretches).toHaveLength(4);
  const data = { layout, shown, time: MINUTES, lengthUnit: 'mm', letter: (name: string) => letters.of(name) };
  const words = stretches.map((stretch) => stretchWords(data, stretch));
  const weak = words.find(([title]) => title.startsWith('Outer north pad'));
  expect(weak?.[0]).toMatch(/^Outer north pad \(.\): 1\.8\d\d to 1\.9\d\d\u00a0mm$/);
  expect(weak?.[1]).toMatch(/^0\.\d+\u00a0mm long, catches weakly, κ = 2\.5 µm\/s, \d+\u00a0% caught$/);
  expect(startWords(FAKE_CASE, 'inlet bay')).toBe('Released evenly in inlet bay');
});

it('a refusal is a full sentence with places to six figures', () => {
  expect(sentenceOf('walls cross at (0.833166247903554, 0)')).toBe('Walls cross at (0.833166, 0).');
  expect(sentenceOf('Is this the outline?')).toBe('Is this the outline?');
});

it('places that lie together share a cloud', () => {
  expect(
    nearGroups(
      [
        [0, 0],
        [1, 0],
        [9, 9],
        [0, 1],
      ],
      2,
    ),
  ).toEqual([[0, 1, 3], [2]]);
});

it('the unit of a length is read from it', () => {
  expect(['1 mm', '0.5 µm', '1e-3mm', 'mm', '5'].map(unitOf)).toEqual([
    'mm',
    'µm',
    'mm',
    undefined,
    undefined,
  ]);
});

const shape = (name: string, closed: boolean, role?: 'outline' | 'hole') => ({
  name,
  closed,
  ...(role === undefined ? {} : { role }),
  size: [10, 10] as [number, number],
});
const drawing = {
  shapes: [
    shape('frame', true, 'outline'),
    shape('rim', true, 'hole'),
    shape('bay', true, 'hole'),
    shape('baffle', false),
  ],
  notes: [],
};
const file = { name: 'cell.svg', text: '<svg/>' };

it('a complete form becomes a case file with its drawing', () => {
  const form = { ...proposedForm(drawing), drawingUnit: '1 mm', diffusion: '1e-4 mm^2/min' };
  setRole(form, 1, 'outline');
  setRole(form, 2, 'region');
  setRole(form, 3, 'inner wall');
  form.catches[1] = true;
  form.catches[3] = true;
  const upload = uploadOf(file, drawing, form);
  expect(upload).toMatchObject({ files: { 'cell.svg': '<svg/>' } });
  expect(JSON.parse((upload as { case: string }).case)).toMatchObject({
    title: 'cell',
    units: { length: 'mm', time: 'min' },
    drawing: {
      file: 'cell.svg',
      outline: 'rim',
      holes: {},
      innerWalls: { baffle: 'baffle' },
      regions: { bay: 'bay' },
      ignore: ['frame'],
      scale: { is: '1 mm' },
    },
    walls: { 'outer wall': { on: 'outline' }, baffle: { on: 'baffle' } },
    layouts: { 'as drawn': { 'outer wall': 'absorbing', baffle: 'absorbing' } },
    starts: { bay: { evenIn: 'bay' }, anywhere: { evenIn: 'everywhere' } },
  });
});

it('an incomplete form says what is missing', () => {
  const form = { ...proposedForm(drawing), drawingUnit: '1 mm', diffusion: '1 mm^2/s' };
  form.catches[0] = true;
  expect(uploadOf(file, drawing, { ...form, drawingUnit: '12' })).toMatch(/how long one drawing unit/);
  expect(uploadOf(file, drawing, { ...form, diffusion: ' ' })).toMatch(/which D/);
  expect(uploadOf(file, drawing, { ...form, catches: [] })).toMatch(/endless/);
  setRole(form, 0, 'left out');
  expect(uploadOf(file, drawing, form)).toMatch(/which shape is the outline/);
});

it('what no longer is a wall no longer catches', () => {
  const form = { ...proposedForm(drawing), drawingUnit: '1 mm', diffusion: '1 mm^2/s' };
  form.catches[1] = true;
  setRole(form, 1, 'region');
  expect(uploadOf(file, drawing, form)).toMatch(/endless/);
});

it('a drawing with a physical size is not asked for its unit', () => {
  const form = { ...proposedForm(drawing), diffusion: '1 mm^2/s', catches: [true] };
  const upload = uploadOf(file, { ...drawing, drawingUnit: '0.01 mm' }, form);
  const made = JSON.parse((upload as { case: string }).case);
  expect(made.units.length).toBe('mm');
  expect(made.drawing).not.toHaveProperty('scale');
});

it('an open line can only be an inner wall', () => {
  expect(drawing.shapes.map((one) => rolesFor(one).length)).toEqual([5, 5, 5, 2]);
});

it('the address names case, layout and start, whatever signs they hold', () => {
  const place = { case: 'ab12', layout: 'a & b', start: 'x=1 #2' };
  expect(readPlace(placeText(place))).toEqual(place);
  expect(readPlace('')).toBeUndefined();
});
