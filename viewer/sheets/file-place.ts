import { button, el } from '../page/dom.ts';

/** A file the user gave, as text. */
export interface GivenFile {
  readonly name: string;
  readonly text: string;
}

/** The text of each file. */
export function readFiles(files: readonly File[]): Promise<GivenFile[]> {
  return Promise.all(files.map(async (file) => ({ name: file.name, text: await file.text() })));
}

/** A button that opens the file dialogue and hands on what was chosen. */
export function fileButton(
  words: string,
  take: (files: readonly File[]) => void,
  strong: boolean,
): HTMLElement {
  const input = el('input', {
    type: 'file',
    accept: '.svg,.json,image/svg+xml,application/json',
    multiple: true,
    tabindex: -1,
    'aria-hidden': 'true',
    class: 'heard',
  });
  input.addEventListener('change', () => {
    const files = [...(input.files ?? [])];
    input.value = '';
    if (files.length > 0) take(files);
  });
  return el(
    'span',
    {},
    button(words, () => input.click(), { class: strong ? 'strong' : 'quiet' }),
    input,
  );
}

/** Takes files dropped anywhere on the page; marks the body while one hangs over it. */
export function takeDrops(take: (files: readonly File[]) => void): void {
  let depth = 0;
  const mark = (on: boolean) => document.body.classList.toggle('over', on);
  const carriesFiles = (event: DragEvent) => event.dataTransfer?.types.includes('Files') === true;
  addEventListener('dragenter', (event) => {
    if (carriesFiles(event)) mark(++depth > 0);
  });
  addEventListener('dragleave', (event) => {
    if (!carriesFiles(event)) return;
    depth = Math.max(0, depth - 1);
    mark(depth > 0);
  });
  addEventListener('dragover', (event) => {
    if (carriesFiles(event)) event.preventDefault();
  });
  addEventListener('drop', (event) => {
    if (!carriesFiles(event)) return;
    event.preventDefault();
    depth = 0;
    mark(false);
    const files = [...(event.dataTransfer?.files ?? [])];
    if (files.length > 0) take(files);
  });
}
