import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, expect, it } from 'vitest';
import type { Answers } from '../../src/run/answers.ts';
import type { CaseView, DrawingView, SampleView } from '../../src/service/contract.ts';
import { room, served, sheet } from './served.ts';

const drawnRoom = {
  ...room,
  title: 'Sheet',
  drawing: { file: 'sheet.svg' },
  walls: { rim: { on: 'outline' } },
  layouts: { open: { rim: 'absorbing' } },
  starts: undefined,
  pins: undefined,
  asked: undefined,
};

const folder = mkdtempSync(join(tmpdir(), 'tarry-samples-'));
writeFileSync(join(folder, 'room.case.json'), JSON.stringify(room));
writeFileSync(join(folder, 'drawn.case.json'), JSON.stringify(drawnRoom));
writeFileSync(join(folder, 'sheet.svg'), sheet);
writeFileSync(join(folder, 'README.md'), 'not a case');

const { service, json, errorOf, solve } = served({ samples: folder });
afterAll(async () => {
  await service.close();
  rmSync(folder, { recursive: true });
});

const upload = {
  svg: sheet,
  name: 'sheet.svg',
  length: 'mm',
  time: 's',
  diffusion: '1 mm^2/s',
  catching: ['all'],
};

it('lists the samples of its folder and opens each, with the drawing it names', async () => {
  expect(await json<SampleView[]>('GET', '/api/samples')).toEqual([
    { name: 'drawn', title: 'Sheet' },
    { name: 'room', title: 'Room with two pads' },
  ]);
  expect((await json<CaseView>('POST', '/api/samples/room')).layouts).toHaveLength(3);
  expect((await json<CaseView>('POST', '/api/samples/drawn')).drawing).toContain('40.0 × 40.0 mm');
});

it('opens by name nothing else that lies in the folder or outside it', async () => {
  for (const name of [
    'README',
    'README.md',
    'sheet.svg',
    'room.case.json',
    '.',
    '..%2f..%2fpackage',
    '__proto__',
  ]) {
    const error = await errorOf('POST', `/api/samples/${name}`);
    expect([error.status, error.code], name).toEqual([404, 'UNKNOWN_SAMPLE']);
  }
});

it('tells the shapes of a drawing, what each is taken as, and its physical unit', async () => {
  const view = await json<DrawingView>('POST', '/api/drawings', { svg: sheet, name: 'sheet.svg' });
  expect(view.shapes.map(({ name, role, closed }) => [name, role, closed])).toEqual([
    ['rim', 'outline', true],
    ['post', 'hole', true],
  ]);
  expect(view.shapes[0]?.size[0]).toBeCloseTo(40, 9);
  expect(view.drawingUnit).toBeDefined();
});

it('makes a case of a drawing by its physical size, and solves it', async () => {
  const theCase = await json<CaseView>('POST', '/api/cases', upload);
  expect(theCase.drawing).toBe('40.0 × 40.0 mm, 1 post');
  const { answers } = await solve(theCase.id, 'as drawn');
  const [answer] = answers as Answers[];
  // Area of the square without the disc; chords of a fine polygon make the disc smaller by less than 1 %.
  expect(Math.abs((answer?.mesh.area ?? 0) - (1600 - 25 * Math.PI))).toBeLessThan(0.01 * 25 * Math.PI);
  expect(answer?.start).toBe('anywhere');
});

it('makes a case of a drawing by the unit that is given with it', async () => {
  const theCase = await json<CaseView>('POST', '/api/cases', { ...upload, drawingUnit: '0.5 mm' });
  expect(theCase.drawing).toContain('20.0 × 20.0 mm');
});

it('takes the drawing that a case names along with the case, and from nowhere else', async () => {
  const text = JSON.stringify(drawnRoom);
  const theCase = await json<CaseView>('POST', '/api/cases', { case: text, files: { 'sheet.svg': sheet } });
  expect(theCase.drawing).toContain('1 post');
  expect((await errorOf('POST', '/api/cases', { case: text })).status).toBe(422);
  for (const file of ['/etc/passwd', '../package.json', 'file:///etc/passwd', '/etc/hostname.svg']) {
    const outside = JSON.stringify({ ...drawnRoom, drawing: { file } });
    expect((await errorOf('POST', '/api/cases', { case: outside })).status, file).toBe(422);
  }
});

it('refuses drawings that are none, and XML that grows when it is read', async () => {
  const bomb = '<!DOCTYPE svg [<!ENTITY a "aaaaaaaaaa"><!ENTITY b "&a;&a;&a;">]><svg>&b;</svg>';
  for (const svg of ['', 'no xml', '<svg', bomb, '<html></html>']) {
    expect((await errorOf('POST', '/api/drawings', { svg, name: 'a.svg' })).status, svg).toBe(422);
  }
  expect((await errorOf('POST', '/api/drawings', { svg: sheet, name: 'a.exe' })).status).toBe(422);
});
