import { expect, it } from 'vitest';
import { drawingCase } from '../../src/service/drawing-case.ts';

const upload = {
  svg: '<svg/>',
  name: 'dish.svg',
  length: 'mm',
  time: 's',
  diffusion: '1e-4 mm^2/s',
  catching: ['all'],
};

it('makes a case of a drawing with its unit as a scale and a wall per catching loop', () => {
  const { text, files } = drawingCase({
    ...upload,
    drawingUnit: '0.1 mm',
    catching: ['outline', 'post 1', 'post 1'],
  });
  expect(files).toEqual({ 'dish.svg': '<svg/>' });
  expect(JSON.parse(text)).toMatchObject({
    title: 'dish',
    drawing: { file: 'dish.svg', scale: { is: '0.1 mm' } },
    walls: { 'outer wall': { on: 'outline' }, 'post 1': { on: 'post 1' } },
    layouts: { 'as drawn': { 'outer wall': 'absorbing', 'post 1': 'absorbing' } },
  });
});

it('leaves the scale to the drawing when no unit is given', () => {
  expect(JSON.parse(drawingCase(upload).text).drawing).toEqual({ file: 'dish.svg' });
});

it('takes only the last part of a file name, and makes one up where nothing is left', () => {
  const nameOf = (name: string) => Object.keys(drawingCase({ ...upload, name }).files)[0];
  expect(nameOf('../../etc/passwd')).toBe('passwd.svg');
  expect(nameOf('C:\\drawings\\dish.SVG')).toBe('dish.SVG');
  expect(nameOf('a\u0000b.svg')).toBe('ab.svg');
  for (const name of ['', '..', '/', '.svg', 'x/..']) expect(nameOf(name)).toBe('drawing.svg');
});
