import { button, el } from './dom.ts';

export interface ChoiceItem {
  readonly value: string;
  readonly words: string;
  /** Small words behind it. */
  readonly note?: string;
}

export interface ChoiceOptions {
  /** What is chosen, for those who hear the page. */
  readonly label: string;
  readonly items: readonly ChoiceItem[];
  readonly chosen: string;
  readonly choose: (value: string) => void;
}

let count = 0;

/**
 * A word in a sentence that can be changed. A press opens a plain list below the word; arrows and typing select,
 * Enter keeps, Esc restores.
 */
export function choice(options: ChoiceOptions): HTMLElement {
  const { items, chosen, label } = options;
  const words = items.find((item) => item.value === chosen)?.words ?? chosen;
  const root = el('span', { class: 'choice' });
  const listId = `choice-${++count}`;
  const word = button(words, () => (list.hidden ? open() : close(true)), {
    class: 'word',
    'aria-haspopup': 'listbox',
    'aria-expanded': 'false',
    'aria-label': `${label}: ${words}`,
  });
  const list = el('ul', { class: 'list', role: 'listbox', id: listId, tabindex: -1, 'aria-label': label });
  list.hidden = true;
  const rows = items.map((item, index) => {
    const row = el('li', { role: 'option', id: `${listId}-${index}` }, item.words);
    if (item.note !== undefined) row.append(el('small', {}, item.note));
    row.addEventListener('click', () => keep(index));
    row.addEventListener('pointermove', () => point(index));
    return row;
  });
  list.append(...rows);
  let active = Math.max(
    0,
    items.findIndex((item) => item.value === chosen),
  );
  let typed = '';
  let typedAt = 0;

  function point(index: number): void {
    active = Math.min(items.length - 1, Math.max(0, index));
    rows.forEach((row, i) => {
      row.setAttribute('aria-selected', String(i === active));
    });
    list.setAttribute('aria-activedescendant', `${listId}-${active}`);
    rows[active]?.scrollIntoView({ block: 'nearest' });
  }
  function open(): void {
    list.hidden = false;
    word.setAttribute('aria-expanded', 'true');
    point(
      Math.max(
        0,
        items.findIndex((item) => item.value === chosen),
      ),
    );
    list.focus();
  }
  function close(back: boolean): void {
    list.hidden = true;
    word.setAttribute('aria-expanded', 'false');
    if (back) word.focus();
  }
  function keep(index: number): void {
    close(true);
    const item = items[index];
    if (item !== undefined && item.value !== chosen) options.choose(item.value);
  }
  function type(letter: string, at: number): void {
    typed = at - typedAt > 700 ? letter : typed + letter;
    typedAt = at;
    const found = items.findIndex((item) => item.words.toLowerCase().startsWith(typed));
    if (found >= 0) point(found);
  }
  word.addEventListener('keydown', (event) => {
    if (event.key !== 'ArrowDown' && event.key !== 'ArrowUp') return;
    event.preventDefault();
    open();
  });
  list.addEventListener('keydown', (event) => {
    const moves: Record<string, number> = {
      ArrowDown: active + 1,
      ArrowUp: active - 1,
      Home: 0,
      End: items.length - 1,
    };
    const to = moves[event.key];
    if (to !== undefined) point(to);
    else if (event.key === 'Enter' || event.key === ' ') keep(active);
    else if (event.key === 'Escape') close(true);
    else if (event.key === 'Tab') return close(false);
    else if (event.key.length === 1) type(event.key.toLowerCase(), event.timeStamp);
    else return;
    event.preventDefault();
    event.stopPropagation();
  });
  list.addEventListener('focusout', (event) => {
    if (!root.contains(event.relatedTarget as Node | null)) close(false);
  });
  root.append(word, list);
  return root;
}
