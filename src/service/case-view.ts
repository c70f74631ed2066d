import { type Healing, pointAt } from '../../mesher/index.ts';
import type { Asked, Case, CaseUnits, Diffusion, Drawing, Start } from '../case/case.ts';
import type { CaseView } from './contract.ts';

/** What the page says about a case before anything is solved. */
export function caseView(theCase: Case): CaseView {
  const { drawing, units, particle } = theCase;
  return {
    id: theCase.hash,
    title: theCase.title,
    units: { ...units },
    layouts: theCase.layouts.map(({ name }) => name),
    reference: theCase.reference,
    starts: theCase.starts.map((start) => ({ name: start.name, words: startWords(theCase, start) })),
    asked: theCase.asked.map(askedView),
    drawing: [sizeWords(drawing, units), ...contents(drawing)].join(', '),
    diffusion: diffusionWords(particle.diffusion, particle.diffusionIn.size, units),
    healed: drawing.healed.map((one) => healedWords(one, units)),
    taken: [...drawing.taken],
    leftOut: [...drawing.leftOut],
    notAvailable: [...new Set(notAvailable(theCase))],
    warnings: [...theCase.warnings],
  };
}

function notAvailable(theCase: Case): string[] {
  return [
    ...theCase.notAvailable,
    ...theCase.layouts.flatMap((layout) => layout.notAvailable ?? []),
    ...theCase.starts.flatMap((start) => start.notAvailable ?? []),
  ];
}

function startWords(theCase: Case, start: Start): string {
  const { units, drawing } = theCase;
  switch (start.kind) {
    case 'evenIn': {
      if (start.region === 'everywhere') return 'released evenly everywhere';
      return `released evenly in ${drawing.regions[start.region]?.name ?? start.name}`;
    }
    case 'point':
      return `released at ${placeWords(start.at, units)}`;
    case 'spot':
      return `released evenly within ${withUnit(short(start.radius), units.length)} of ${placeWords(start.at, units)}`;
    case 'notYet':
      return start.notAvailable.join('; ');
  }
}

function askedView({ text, start, limit }: Asked): CaseView['asked'][number] {
  if (limit === undefined) return { text, start };
  return { text, start, limit: `${limit.kind === 'under' ? 'under' : 'at least'} ${limit.text}` };
}

/** Width and height of the outline, as a drawing states them: '1.20 × 0.80 mm'. */
function sizeWords({ outline }: Drawing, units: CaseUnits): string {
  const low = [Number.POSITIVE_INFINITY, Number.POSITIVE_INFINITY];
  const high = [Number.NEGATIVE_INFINITY, Number.NEGATIVE_INFINITY];
  for (const { curve } of outline.pieces) {
    for (let i = 0; i <= 32; i++) {
      const point = pointAt(curve, i / 32);
      for (const axis of [0, 1] as const) {
        low[axis] = Math.min(low[axis] ?? 0, point[axis]);
        high[axis] = Math.max(high[axis] ?? 0, point[axis]);
      }
    }
  }
  const extent = (axis: 0 | 1): number => (high[axis] ?? 0) - (low[axis] ?? 0);
  return withUnit(`${extent(0).toPrecision(3)} × ${extent(1).toPrecision(3)}`, units.length);
}

/** What lies in the outline, in words: holes by the word their names share ('post 1', 'far post': '2 posts'). */
function contents({ holes, innerWalls, regions }: Drawing): string[] {
  const nouns = new Set(holes.map(({ name }) => /(\p{L}+)[\s\d]*$/u.exec(name)?.[1] ?? 'hole'));
  const [noun] = nouns;
  const kind = nouns.size === 1 && noun !== undefined ? noun : 'hole';
  return [
    count(holes.length, kind),
    count(innerWalls.length, 'inner wall'),
    count(regions.length, 'region'),
  ].flat();
}

function count(number: number, what: string): string[] {
  if (number === 0) return [];
  return [number === 1 ? `1 ${what}` : `${number} ${what}s`];
}

function diffusionWords(everywhere: Diffusion, regions: number, units: CaseUnits): string {
  const unit = units.length === '' ? '' : `${units.length}²/${units.time}`;
  const value = diffusionValue(everywhere, unit);
  return regions === 0 ? value : `${value}, other values in ${count(regions, 'region').join('')}`;
}

function diffusionValue(diffusion: Diffusion, unit: string): string {
  if (diffusion.kind === 'constant') return withUnit(short(diffusion.value), unit);
  if (diffusion.kind === 'varying') return 'varies with place';
  const { tensor } = diffusion;
  if (tensor.kind === 'varying') return 'varies with place and direction';
  const [xx, xy, yy] = tensor.value;
  return withUnit(`xx ${short(xx)}, xy ${short(xy)}, yy ${short(yy)}`, unit);
}

function healedWords({ what, loop, at }: Healing, units: CaseUnits): string {
  return `${what} on ${loop} at ${placeWords(at, units)}`;
}

function placeWords([x, y]: readonly [number, number], units: CaseUnits): string {
  return withUnit(`(${short(x)}, ${short(y)})`, units.length);
}

function withUnit(text: string, unit: string): string {
  return unit === '' ? text : `${text} ${unit}`;
}

function short(value: number): string {
  return String(Number(value.toPrecision(6))).replace('-', '−');
}
