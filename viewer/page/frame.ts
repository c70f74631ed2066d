import { button, el } from './dom.ts';

/** The drafting sheet: the frame with its centre ticks, the place for what is shown, and the title block below. */

export interface TitleBlock {
  readonly case: string;
  /** What the second cell is: the drawing of a case, or a file that is not opened yet. */
  readonly drawing?: string;
  readonly file?: string;
  readonly solver: string;
  readonly lastChange: string;
  /** Sheets that exist for what is open. */
  readonly sheet?: string;
  readonly another?: () => void;
}

export class Frame {
  readonly sheet = el('main', { class: 'sheet', id: 'sheet' });
  readonly #block = el('footer', { class: 'title-block', 'aria-label': 'Title block' });
  readonly #live = el('div', { class: 'heard', 'aria-live': 'polite', role: 'status' });
  #said = '';

  constructor(body: HTMLElement) {
    const frame = el('div', { class: 'frame-lines' }, this.sheet, this.#block);
    body.replaceChildren(frame, this.#live);
  }

  /** Puts a sheet into the frame. The class tells the style sheet which one. */
  show(kind: string, ...children: Node[]): void {
    document.body.dataset['state'] = kind;
    this.sheet.className = `sheet sheet-${kind}`;
    this.sheet.replaceChildren(...children);
  }

  /** Says something once to those who hear the page. */
  say(words: string): void {
    if (words === this.#said) return;
    this.#said = words;
    this.#live.textContent = words;
  }

  fill(block: TitleBlock): void {
    const cells: HTMLElement[] = [];
    const cell = (label: string, name: string, ...value: (Node | string | undefined)[]) => {
      cells.push(
        el(
          'div',
          { class: `cell cell-${name}` },
          el('span', { class: 'label' }, label),
          el('span', { class: 'value' }, ...value),
        ),
      );
    };
    const { another } = block;
    cell(
      'Case',
      'case',
      block.case,
      another === undefined ? undefined : button('Open another', another, { class: 'plain link' }),
    );
    if (block.drawing !== undefined) cell('Drawing', 'drawing', block.drawing);
    if (block.file !== undefined) cell('File', 'drawing', block.file);
    cell('Solver', 'solver', el('span', { class: 'solver-words' }, block.solver));
    cell('Last change', 'change', block.lastChange);
    if (block.sheet !== undefined) {
      cells.push(
        el(
          'div',
          { class: 'cell cell-sheet', 'aria-current': 'page' },
          el('span', { class: 'label' }, 'Sheet 1'),
          el('span', { class: 'value' }, block.sheet),
        ),
      );
    }
    // Keep the focus where it was if its button is still there.
    const words = this.#block.contains(document.activeElement)
      ? document.activeElement?.textContent
      : undefined;
    this.#block.replaceChildren(...cells);
    if (words !== undefined) {
      for (const one of this.#block.querySelectorAll('button')) if (one.textContent === words) one.focus();
    }
  }

  /** Changes the words about the solver only, so that progress does not rebuild the block. */
  solver(words: string): void {
    const place = this.#block.querySelector('.solver-words');
    if (place !== null) place.textContent = words;
  }
}
