import { type Curve, enclosedArea } from '../../mesher/index.ts';
import { CaseError } from '../case/errors.ts';
import { composed, identity, type Matrix, mapCurve, readTransform } from './affine.ts';
import { boxOf, type FoundDrawing, type FoundShape } from './found-shape.ts';
import { type DrawnElement, shapeElements, strokesOf } from './svg-elements.ts';
import { readPage } from './svg-page.ts';
import { readXml, type XmlElement } from './xml-tree.ts';

/**
 * The shapes of an SVG file with every transform applied, turned so that they look as drawn with y upwards.
 *
 * The lower left corner of the page becomes (0, 0); a file that says no page keeps x and gets −y.
 *
 * @throws {CaseError} where the file, an element or a path cannot be read, with file and line
 * Source: W3C, Scalable Vector Graphics (SVG) 1.1 (second edition, 2011).
 */
export function readSvg(text: string, file: string): FoundDrawing {
  const svg = readXml(text, file).find((element) => element.tag === 'svg');
  if (!svg) {
    throw new CaseError(
      'DRAWING_NOT_READ',
      `${file} has no <svg> element`,
      { file, line: 1 },
      'Save the drawing as SVG',
    );
  }
  const page = readPage(svg, file);
  const bottom = page.height === undefined ? 0 : page.top + page.height;
  const walk = new Walk(file);
  walk.into(svg, { matrix: [1, 0, 0, -1, -page.left, bottom], groups: [], filled: true, shown: true });
  return {
    shapes: walk.shapes,
    leftOut: walk.leftOut(),
    ...(page.scale ? { physicalScale: page.scale } : {}),
    frame:
      page.height === undefined
        ? 'y is turned upwards: −y as written'
        : 'measured from the lower left corner of the page, y upwards',
    top: bottom,
    left: page.left,
  };
}

/** What an element hands down to those in it. */
interface Inherited {
  readonly matrix: Matrix;
  readonly groups: readonly string[];
  readonly filled: boolean;
  readonly shown: boolean;
}

/** Elements whose children are drawn in place. */
const containers = new Set(['g', 'a', 'switch']);
/** Elements that say something about the drawing and are not part of it. */
const silent = new Set(['title', 'desc', 'metadata', 'defs', 'script']);

/** More is no drawing of a compartment, and telling which shape lies in which would take long. */
const mostShapes = 20_000;

class Walk {
  readonly shapes: FoundShape[] = [];
  /** Names given out, with the number the next twin would get. */
  private readonly names = new Map<string, number>();
  /** Lines of elements not taken, by what they are. */
  private readonly skipped = new Map<string, number[]>();
  private readonly file: string;

  constructor(file: string) {
    this.file = file;
  }

  into(parent: XmlElement, inherited: Inherited): void {
    for (const element of parent.children) {
      if (silent.has(element.tag) || element.tag.includes(':')) continue;
      const { tag } = element;
      if (containers.has(tag)) this.into(element, this.inheritedBy(element, inherited, true));
      else if (shapeElements.has(tag))
        this.take(element, tag as DrawnElement, this.inheritedBy(element, inherited, false));
      else this.skip(tag === 'style' ? 'style sheet; only attributes are read' : `<${tag}>`, element.line);
    }
  }

  leftOut(): string[] {
    return [...this.skipped].map(([what, lines]) => {
      const shown = lines.slice(0, 5).join(', ');
      return `${what} (line${lines.length > 1 ? 's' : ''} ${shown}${lines.length > 5 ? ', …' : ''})`;
    });
  }

  private take(element: XmlElement, tag: DrawnElement, own: Inherited): void {
    if (!own.shown) {
      this.skip('hidden shapes', element.line);
      return;
    }
    const strokes = strokesOf(element, tag, this.file).filter((stroke) => stroke.curves.length > 0);
    if (strokes.length === 0) this.skip(`<${tag}> without size`, element.line);
    if (this.shapes.length + strokes.length > mostShapes) {
      throw new CaseError(
        'DRAWING_TOO_LARGE',
        `${this.file} has more than ${mostShapes} shapes`,
        { file: this.file, line: element.line },
        'Save only the layer that shows the compartment',
      );
    }
    for (const stroke of strokes) {
      const curves = stroke.curves.map((curve) => mapCurve(own.matrix, curve));
      const position = `shape ${this.shapes.length + 1}`;
      const given = givenName(element);
      this.shapes.push({
        name: this.uniqueName(given ?? position),
        isNamed: given !== undefined,
        element: tag,
        line: element.line,
        groups: own.groups,
        curves,
        closed: stroke.closed || isPaintedClosed(curves, own.filled && tag !== 'line'),
      });
    }
  }

  private inheritedBy(element: XmlElement, from: Inherited, isGroup: boolean): Inherited {
    const style = styleOf(element);
    const written = element.attributes.get('transform');
    const matrix = written === undefined ? identity : readTransform(written);
    if (!matrix) throw this.refused(element, `transform="${shortened(written ?? '')}" cannot be read`);
    if (!(Math.abs(matrix[0] * matrix[3] - matrix[1] * matrix[2]) > 0)) {
      throw this.refused(element, `transform="${shortened(written ?? '')}" flattens the shape to a line`);
    }
    const fill = style.get('fill') ?? 'inherit';
    const name = isGroup ? givenName(element) : undefined;
    return {
      matrix: composed(from.matrix, matrix),
      groups: name === undefined ? from.groups : [...from.groups, name],
      filled: fill === 'inherit' ? from.filled : fill !== 'none',
      shown: from.shown && style.get('display') !== 'none' && style.get('visibility') !== 'hidden',
    };
  }

  private uniqueName(wanted: string): string {
    let name = wanted;
    let next = this.names.get(wanted) ?? 1;
    while (this.names.has(name)) name = `${wanted} ${++next}`;
    this.names.set(wanted, next);
    if (name !== wanted) this.names.set(name, 1);
    return name;
  }

  private skip(what: string, line: number): void {
    const lines = this.skipped.get(what);
    if (lines) lines.push(line);
    else this.skipped.set(what, [line]);
  }

  private refused(element: XmlElement, what: string): CaseError {
    return new CaseError(
      'DRAWING_NOT_READ',
      `${this.file} line ${element.line}, <${element.tag}>: ${what}`,
      { file: this.file, line: element.line },
      'Mend the element, or save the drawing again as plain SVG',
    );
  }
}

/** A title, else an id; blank ones are none. */
function givenName(element: XmlElement): string | undefined {
  const title = element.children.find((child) => child.tag === 'title')?.text;
  for (const text of [title, element.attributes.get('id')]) {
    const name = text?.replace(/\s+/g, ' ').trim();
    if (name) return name;
  }
  return undefined;
}

/** Presentation attributes and the `style` attribute, which wins over them. */
function styleOf(element: XmlElement): Map<string, string> {
  const style = new Map<string, string>();
  for (const key of ['fill', 'display', 'visibility']) {
    const value = element.attributes.get(key);
    if (value !== undefined) style.set(key, value.trim());
  }
  for (const part of (element.attributes.get('style') ?? '').split(';')) {
    const [key, value] = part.split(':');
    if (key !== undefined && value !== undefined)
      style.set(key.trim(), value.replace('!important', '').trim());
  }
  return style;
}

/** Ends on its own start within 1e-9 of its size, or filled and with some area to fill. */
function isPaintedClosed(curves: readonly Curve[], filled: boolean): boolean {
  const from = curves[0]?.from;
  const to = curves.at(-1)?.to;
  if (!from || !to) return false;
  const [low, high] = boxOf(curves);
  const size = Math.hypot(high[0] - low[0], high[1] - low[1]);
  if (curves.length > 1 && Math.hypot(to[0] - from[0], to[1] - from[1]) <= 1e-9 * size) return true;
  if (!filled) return false;
  const closing: Curve = { kind: 'line', from: to, to: from };
  const pieces = [...curves, closing].map((curve, tag) => ({ curve, tag }));
  return Math.abs(enclosedArea({ name: '', pieces })) > 1e-9 * size * size;
}

function shortened(text: string): string {
  return text.length > 40 ? `${text.slice(0, 40)}…` : text;
}
