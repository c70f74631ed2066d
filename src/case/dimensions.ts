/** What kinds of quantity a case states, as powers of its length and time. */
const powers = {
  length: [1, 0],
  time: [0, 1],
  area: [2, 0],
  /** D */
  diffusion: [2, -1],
  /** κ of a partly absorbing wall, P of a permeable one */
  reactivity: [1, -1],
  /** components of a drift */
  speed: [1, -1],
  /** loss */
  rate: [0, -1],
  /** 0 to 1, or in % */
  fraction: [0, 0],
  /** in degrees */
  angle: [0, 0],
  number: [0, 0],
} as const;

export type Dimension = keyof typeof powers;

export const powersOf = (dimension: Dimension): readonly [length: number, time: number] => powers[dimension];

const names: Record<Dimension, string> = {
  length: 'a length',
  time: 'a time',
  area: 'an area',
  diffusion: 'a diffusion coefficient',
  reactivity: 'a reactivity',
  speed: 'a speed',
  rate: 'a rate',
  fraction: 'a fraction',
  angle: 'an angle',
  number: 'a plain number',
};

const examples: Record<Dimension, string> = {
  length: '0.5',
  time: '20',
  area: '0.5',
  diffusion: '1e-4',
  reactivity: '2e-3',
  speed: '2e-3',
  rate: '0.01',
  fraction: '10 %',
  angle: '30 deg',
  number: '0.5',
};

export const nameOf = (dimension: Dimension): string => names[dimension];

const raised = (name: string, power: number): string => (power === 1 ? name : `${name}^${power}`);

/** Unit of powers of a length and a time in plain letters: `mm^2/s`, `1/s`; empty for none. */
export function unitText(
  [length, time]: readonly [number, number],
  of: { length: string; time: string },
): string {
  const all = [
    { name: of.length, power: length },
    { name: of.time, power: time },
  ];
  const over = all.filter((unit) => unit.power > 0).map((unit) => raised(unit.name, unit.power));
  const under = all.filter((unit) => unit.power < 0).map((unit) => raised(unit.name, -unit.power));
  if (over.length + under.length === 0) return '';
  const top = over.length === 0 ? '1' : over.join(' ');
  return under.length === 0 ? top : `${top}/${under.length > 1 ? `(${under.join(' ')})` : under.join('')}`;
}

/** An example of a quantity in a case's units, in quotes, or a bare number where it has none. */
export function exampleOf(dimension: Dimension, of: { length: string; time: string }): string {
  const unit = of.length === '' ? '' : unitText(powers[dimension], of);
  const text = `${examples[dimension]}${unit === '' ? '' : ` ${unit}`}`;
  return /^[\d.e-]+$/.test(text) ? text : JSON.stringify(text);
}
