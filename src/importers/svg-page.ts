import { CaseError } from '../case/errors.ts';
import type { PhysicalScale } from './found-shape.ts';
import type { XmlElement } from './xml-tree.ts';

/** What the root element of an SVG says about the page, in user units (those of the coordinates in it). */
export interface SvgPage {
  readonly left: number;
  readonly top: number;
  /** Absent when neither viewBox nor sizes are given. */
  readonly height?: number;
  readonly scale?: PhysicalScale;
}

/** Millimetres in a pixel, and in each unit of CSS (W3C, CSS Values and Units 3: 1 in = 96 px = 72 pt = 6 pc). */
const pixel = 25.4 / 96;
const millimetres: Readonly<Record<string, number>> = {
  mm: 1,
  cm: 10,
  in: 25.4,
  pt: 25.4 / 72,
  pc: 25.4 / 6,
  px: pixel,
  q: 0.25,
};

/**
 * Page origin and the length of a user unit.
 *
 * A size without a unit, or in percent, says nothing physical: then there is no scale and it is asked.
 *
 * @throws {CaseError} DRAWING_NOT_READ
 */
export function readPage(svg: XmlElement, file: string): SvgPage {
  const width = lengthOf(svg, 'width', file);
  const height = lengthOf(svg, 'height', file);
  const box = viewBoxOf(svg, file);
  if (!box) {
    const sized = width?.unit !== undefined || height?.unit !== undefined;
    const given = height && height.unit !== '%' ? height : undefined;
    return {
      left: 0,
      top: 0,
      ...(given ? { height: (given.value * (millimetres[given.unit ?? 'px'] ?? pixel)) / pixel } : {}),
      ...(sized && width?.unit !== '%' && height?.unit !== '%'
        ? {
            scale: {
              value: pixel,
              unit: 'mm',
              from: 'the page size (no viewBox, so 96 units are one inch)',
            },
          }
        : {}),
    };
  }
  const scales = [perUnitOf(width, box.width), perUnitOf(height, box.height)].filter((s) => s !== undefined);
  const page = { left: box.left, top: box.top, height: box.height };
  if (scales.length === 0) return page;
  const [small, large] = [Math.min(...scales), Math.max(...scales)];
  if (large > small * (1 + 1e-6) && (svg.attributes.get('preserveAspectRatio') ?? '').includes('none')) {
    throw unreadable(
      file,
      svg.line,
      'the page is stretched more one way than the other (preserveAspectRatio none)',
    );
  }
  // "meet", the default, takes the smaller of the two.
  return { ...page, scale: { value: small, unit: 'mm', from: 'the page size' } };
}

interface Length {
  readonly value: number;
  readonly unit?: string;
}

function lengthOf(svg: XmlElement, key: string, file: string): Length | undefined {
  const text = svg.attributes.get(key)?.trim();
  if (text === undefined || text === 'auto') return undefined;
  const match = /^([+-]?(?:\d+\.?\d*|\.\d+)(?:e[+-]?\d+)?)\s*([a-z%]*)$/i.exec(text);
  const value = Number(match?.[1] ?? Number.NaN);
  const unit = (match?.[2] ?? '').toLowerCase();
  if (!(Number.isFinite(value) && value > 0) || !(unit === '' || unit === '%' || unit in millimetres)) {
    throw unreadable(file, svg.line, `${key}="${text}" is no length of a page`);
  }
  return unit === '' ? { value } : { value, unit };
}

function viewBoxOf(
  svg: XmlElement,
  file: string,
): { left: number; top: number; width: number; height: number } | undefined {
  const text = svg.attributes.get('viewBox')?.trim();
  if (text === undefined) return undefined;
  const [left = Number.NaN, top = Number.NaN, width = Number.NaN, height = Number.NaN] = text
    .split(/[\s,]+/)
    .map(Number);
  if (![left, top, width, height].every(Number.isFinite) || width <= 0 || height <= 0) {
    throw unreadable(file, svg.line, `viewBox="${text}" is not left, top, width and height`);
  }
  return { left, top, width, height };
}

function perUnitOf(length: Length | undefined, across: number): number | undefined {
  const perUnit = length?.unit === undefined ? undefined : millimetres[length.unit];
  return length && perUnit !== undefined ? (length.value * perUnit) / across : undefined;
}

function unreadable(file: string, line: number, what: string): CaseError {
  return new CaseError(
    'DRAWING_NOT_READ',
    `${file}: ${what}`,
    { file, line },
    'Give the page a size such as width="12mm"',
  );
}
