/** Makes elements without HTML strings: nothing from a case can become markup, and the content policy stays strict. */

type Child = Node | string | undefined | false;
type Attributes = Readonly<Record<string, string | number | boolean | undefined>>;

function fill<E extends Element>(element: E, attributes: Attributes, children: readonly Child[]): E {
  for (const [name, value] of Object.entries(attributes)) {
    if (value === undefined || value === false) continue;
    element.setAttribute(name, value === true ? '' : String(value));
  }
  for (const child of children) if (child !== undefined && child !== false) element.append(child);
  return element;
}

/** An HTML element with attributes and children. */
export function el<K extends keyof HTMLElementTagNameMap>(
  tag: K,
  attributes: Attributes = {},
  ...children: Child[]
): HTMLElementTagNameMap[K] {
  return fill(document.createElement(tag), attributes, children);
}

/** An SVG element with attributes and children. */
export function svg<K extends keyof SVGElementTagNameMap>(
  tag: K,
  attributes: Attributes = {},
  ...children: Child[]
): SVGElementTagNameMap[K] {
  return fill(document.createElementNS('http://www.w3.org/2000/svg', tag), attributes, children);
}

/** A button that does one thing. */
export function button(words: string, act: () => void, attributes: Attributes = {}): HTMLButtonElement {
  const element = el('button', { type: 'button', ...attributes }, words);
  element.addEventListener('click', act);
  return element;
}

const schemeQuery = '(prefers-color-scheme: dark)';
let printing = false;

/** The scheme in force: that of the system, and always light on paper. */
export function currentScheme(): 'light' | 'dark' {
  return !printing && matchMedia(schemeQuery).matches ? 'dark' : 'light';
}

/** Calls back when the scheme changes, also for a print. Gives back what ends it. */
export function onScheme(changed: () => void): () => void {
  const query = matchMedia(schemeQuery);
  const setPrint = (on: boolean) => () => {
    printing = on;
    changed();
  };
  const [before, after] = [setPrint(true), setPrint(false)];
  query.addEventListener('change', changed);
  addEventListener('beforeprint', before);
  addEventListener('afterprint', after);
  return () => {
    query.removeEventListener('change', changed);
    removeEventListener('beforeprint', before);
    removeEventListener('afterprint', after);
  };
}

/** A colour of the style sheet as '#RRGGBB', for what is drawn outside it. */
export function tokenColour(name: string, fallback: string): string {
  const value = getComputedStyle(document.documentElement).getPropertyValue(name).trim();
  return /^#[0-9a-f]{6}$/i.test(value) ? value : fallback;
}

/** How much larger than designed the reader has set the text: 1 at a root size of 14 px. */
export function textScale(): number {
  const size = Number.parseFloat(getComputedStyle(document.documentElement).fontSize);
  return size > 0 ? size / 14 : 1;
}
