import type { CaseUpload, DrawingView } from '../../src/service/contract.ts';
import { el } from '../page/dom.ts';
import { givenText, numberText, withUnit } from '../words/number-text.ts';
import { drawingPreview } from './drawing-preview.ts';
import { fileButton, type GivenFile } from './file-place.ts';

/** What the user typed, kept when the form is shown again after a refusal. */
export interface TakenForm {
  drawingUnit: string;
  diffusion: string;
  length: string;
  time: string;
  /** Names of loops that catch; undefined until the user chose. */
  catching: string[] | undefined;
}

export interface TakenData {
  readonly file: GivenFile;
  readonly drawing: DrawingView;
  readonly form: TakenForm;
  readonly open: (upload: CaseUpload) => void;
  readonly take: (files: readonly File[]) => void;
}

const COUNTS = [
  'No',
  'One',
  'Two',
  'Three',
  'Four',
  'Five',
  'Six',
  'Seven',
  'Eight',
  'Nine',
  'Ten',
  'Eleven',
  'Twelve',
];

/** '1 mm' gives 'mm'; the unit that the case is then written in. */
export function unitOf(text: string): string | undefined {
  return /^\s*[0-9.eE+-]+\s*([a-zµμ]+)\s*$/u.exec(text)?.[1];
}

/** The form of a dropped drawing: what was found, how long a unit is, D, and what catches. */
export function takenSheet(data: TakenData): HTMLElement[] {
  const { drawing, form } = data;
  const n = drawing.shapes.length;
  const found = `${COUNTS[n] ?? String(n)} ${n === 1 ? 'shape' : 'shapes'} found.`;
  const asked =
    drawing.drawingUnit === undefined ? 'Say how long one unit is, and what catches.' : 'Say what catches.';
  const sentence = el(
    'h1',
    { class: 'sentence large' },
    `${found} ${n === 0 ? 'There is nothing to solve in it.' : asked}`,
  );
  const list = el('ol', { class: 'shapes' });
  const boxes: HTMLInputElement[] = [];
  list.append(...drawing.shapes.map((shape, i) => shapeRow(shape, i + 1, form, boxes)));
  const fields = el('div', { class: 'fields' });
  if (drawing.drawingUnit === undefined) {
    fields.append(
      field('One drawing unit is', 'such as 1 mm or 0.5 µm', form.drawingUnit, (text) => {
        form.drawingUnit = text;
      }),
    );
  } else {
    fields.append(
      el(
        'p',
        { class: 'soft' },
        `The drawing says that one of its units is ${unitWords(drawing.drawingUnit)}.`,
      ),
    );
  }
  fields.append(
    field('It diffuses with D =', 'such as 1e-4 mm^2/s', form.diffusion, (text) => {
      form.diffusion = text;
    }),
  );
  const problem = el('p', { class: 'form-problem', role: 'alert' });
  const act = el('form', { class: 'taken-form', novalidate: true });
  act.append(
    el('fieldset', {}, el('legend', {}, 'Shapes found'), list),
    fields,
    problem,
    el(
      'p',
      { class: 'refusal-acts' },
      el('button', { type: 'submit', class: 'strong' }, 'Take it so'),
      fileButton('Choose another file', data.take, false),
    ),
    ...notes(drawing.notes),
  );
  act.addEventListener('submit', (event) => {
    event.preventDefault();
    form.catching = boxes.filter((box) => box.checked).map((box) => box.value);
    const upload = uploadOf(data);
    if (typeof upload === 'string') problem.textContent = upload;
    else data.open(upload);
  });
  const preview = drawingPreview(
    data.file.text,
    drawing.shapes.map((shape) => shape.name),
  );
  return [sentence, el('div', { class: 'taken-columns' }, el('div', { class: 'preview' }, preview), act)];
}

function unitWords(text: string): string {
  const unit = unitOf(text);
  return unit === undefined ? text : withUnit(givenText(Number.parseFloat(text)), unit);
}

function shapeRow(
  shape: DrawingView['shapes'][number],
  number: number,
  form: TakenForm,
  boxes: HTMLInputElement[],
): HTMLElement {
  const size = `${shape.closed ? 'closed' : 'open'}, ${numberText(shape.size[0])} × ${numberText(shape.size[1])} units`;
  const row = el(
    'li',
    {},
    el('b', { class: 'shape-number' }, String(number)),
    el('span', { class: 'shape-name' }, shape.name),
    el('span', { class: 'shape-role' }, shape.role ?? 'left out'),
    el('span', { class: 'soft' }, size),
  );
  if (shape.role === undefined) return row;
  // The outline answers to this name whatever the file calls it.
  const loop = shape.role === 'outline' ? 'outline' : shape.name;
  const box = el('input', { type: 'checkbox', value: loop });
  box.checked = form.catching?.includes(loop) ?? false;
  boxes.push(box);
  row.append(
    el(
      'label',
      { class: 'catches' },
      box,
      shape.role === 'outline' ? 'the whole outline catches' : 'catches',
    ),
  );
  return row;
}

function field(label: string, hint: string, value: string, changed: (text: string) => void): HTMLElement {
  const input = el('input', {
    type: 'text',
    value,
    placeholder: hint,
    spellcheck: 'false',
    autocomplete: 'off',
  });
  input.addEventListener('input', () => changed(input.value));
  return el('label', { class: 'field' }, el('span', {}, label), input);
}

function notes(lines: readonly string[]): HTMLElement[] {
  if (lines.length === 0) return [];
  const items = lines.map((line) => el('li', {}, line));
  return [el('div', { class: 'notes' }, el('h2', {}, 'About the drawing'), el('ul', {}, ...items))];
}

/** What is sent, or what is still missing, in words. */
export function uploadOf(data: Pick<TakenData, 'file' | 'drawing' | 'form'>): CaseUpload | string {
  const { file, drawing, form } = data;
  const catching = form.catching ?? [];
  const unitText = drawing.drawingUnit ?? form.drawingUnit.trim();
  const length = unitOf(unitText);
  if (length === undefined) return 'Say how long one drawing unit is, with its unit: for example 1 mm.';
  if (form.diffusion.trim() === '')
    return 'Say with which D it diffuses, with its unit: for example 1e-4 mm^2/s.';
  if (catching.length === 0)
    return 'Nothing catches it yet: the time would be endless. Mark at least one wall.';
  return {
    svg: file.text,
    name: file.name,
    ...(drawing.drawingUnit === undefined ? { drawingUnit: unitText } : {}),
    length: form.length === '' ? length : form.length,
    time: form.time === '' ? 's' : form.time,
    diffusion: form.diffusion.trim(),
    catching,
  };
}
