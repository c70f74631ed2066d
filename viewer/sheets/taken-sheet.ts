import type { CaseUpload, DrawingView } from '../../src/service/contract.ts';
import { el } from '../page/dom.ts';
import { givenText, numberText, withUnit } from '../words/number-text.ts';
import { drawingPreview } from './drawing-preview.ts';
import { isWall, rolesFor, setRole, type TakenForm, unitOf, uploadOf } from './drawn-case.ts';
import { fileButton, type GivenFile } from './file-place.ts';

export interface TakenData {
  readonly file: GivenFile;
  readonly drawing: DrawingView;
  readonly form: TakenForm;
  readonly open: (upload: CaseUpload) => void;
  readonly take: (files: readonly File[]) => void;
}

const COUNTS = 'No One Two Three Four Five Six Seven Eight Nine Ten Eleven Twelve'.split(' ');

/** The form of a dropped drawing: what each shape is, how long a unit is, D, and what catches. */
export function takenSheet(data: TakenData): HTMLElement[] {
  const { drawing, form, file } = data;
  const n = drawing.shapes.length;
  const found = `${COUNTS[n] ?? String(n)} ${n === 1 ? 'shape' : 'shapes'} found.`;
  const unit = drawing.drawingUnit === undefined ? ', how long one unit is' : '';
  const asked =
    n === 0 ? 'There is nothing to solve in it.' : `Say what each one is${unit} and what catches.`;
  const list = el('ol', { class: 'shapes' });
  const preview = drawingPreview(
    file.text,
    drawing.shapes.map((shape) => shape.name),
  );
  const draw = () => {
    list.replaceChildren(...drawing.shapes.map((_, i) => shapeRow(data, i, draw)));
    preview.show(form.roles);
  };
  draw();
  const problem = el('p', { class: 'form-problem', role: 'alert' });
  const act = el('form', { class: 'taken-form', novalidate: true });
  act.append(
    el('div', {}, el('h2', {}, 'Shapes found'), list),
    fields(data),
    problem,
    el(
      'p',
      { class: 'refusal-acts' },
      el('button', { type: 'submit', class: 'strong' }, 'Take it so'),
      fileButton('Choose another file', data.take, false),
    ),
    el(
      'p',
      { class: 'soft' },
      'A region names an area for release. An inner wall is thin and has two sides. What is left out stays in the file and plays no part.',
    ),
    ...notes(drawing.notes),
  );
  act.addEventListener('submit', (event) => {
    event.preventDefault();
    const upload = uploadOf(file, drawing, form);
    if (typeof upload === 'string') problem.textContent = upload;
    else data.open(upload);
  });
  return [
    el('h1', { class: 'sentence large' }, `${found} ${asked}`),
    el('div', { class: 'taken-columns' }, el('div', { class: 'preview' }, preview.element), act),
  ];
}

function shapeRow({ drawing, form }: TakenData, index: number, changed: () => void): HTMLElement {
  const shape = drawing.shapes[index];
  if (shape === undefined) return el('li');
  const role = form.roles[index] ?? 'left out';
  const size = `${shape.closed ? 'closed' : 'open'}, ${numberText(shape.size[0])} × ${numberText(shape.size[1])} units`;
  const choices = rolesFor(shape).map((one) => {
    const radio = el('input', { type: 'radio', name: `role-${index}`, value: one });
    radio.checked = one === role;
    radio.addEventListener('change', () => {
      setRole(form, index, one);
      changed();
      document.querySelector<HTMLElement>(`input[name="role-${index}"]:checked`)?.focus();
    });
    return el('label', {}, radio, el('span', {}, one));
  });
  const row = el(
    'li',
    { role: 'group', 'aria-label': shape.name },
    el('b', { class: 'shape-number' }, String(index + 1)),
    el('span', { class: 'shape-name' }, shape.name),
    el('span', { class: 'soft' }, size),
    el('div', { class: 'roles', role: 'radiogroup', 'aria-label': `What ${shape.name} is` }, ...choices),
  );
  if (!isWall(role)) return row;
  const box = el('input', { type: 'checkbox' });
  box.checked = form.catches[index] ?? false;
  box.addEventListener('change', () => {
    form.catches[index] = box.checked;
  });
  row.append(
    el('label', { class: 'catches' }, box, role === 'outline' ? 'the whole outline catches' : 'catches'),
  );
  return row;
}

function fields({ drawing, form }: TakenData): HTMLElement {
  const unit =
    drawing.drawingUnit === undefined
      ? field('One drawing unit is', 'such as 1 mm or 0.5 µm', form.drawingUnit, (text) => {
          form.drawingUnit = text;
        })
      : el(
          'p',
          { class: 'soft' },
          `The drawing says that one of its units is ${unitWords(drawing.drawingUnit)}.`,
        );
  const diffusion = field('It diffuses with D =', 'such as 1e-4 mm^2/s', form.diffusion, (text) => {
    form.diffusion = text;
  });
  return el('div', { class: 'fields' }, unit, diffusion);
}

function unitWords(text: string): string {
  const unit = unitOf(text);
  return unit === undefined ? text : withUnit(givenText(Number.parseFloat(text)), unit);
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
