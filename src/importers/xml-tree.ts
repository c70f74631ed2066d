import { XMLParser, XMLValidator } from 'fast-xml-parser';
import { CaseError } from '../case/errors.ts';

/** An element of an XML file, its tag without a prefix svg:; text between elements is kept only as `text`. */
export interface XmlElement {
  readonly tag: string;
  readonly attributes: ReadonlyMap<string, string>;
  readonly children: readonly XmlElement[];
  readonly text: string;
  readonly line: number;
}

/** Largest drawing read, in bytes of text (CASE.md). */
export const largestDrawing = 5_000_000;

/**
 * Reads XML into a plain tree; entities beyond the five of XML and document types are refused, never followed.
 *
 * @throws {CaseError} DRAWING_TOO_LARGE, DRAWING_UNSAFE, DRAWING_NOT_READ
 */
export function readXml(text: string, file: string): XmlElement[] {
  if (text.length > largestDrawing) {
    throw new CaseError(
      'DRAWING_TOO_LARGE',
      `${file} has ${(text.length / 1e6).toFixed(1)} MB; a drawing may have 5 MB`,
      { file },
      'Take pictures and unused parts out of the drawing',
    );
  }
  const forbidden = /<!(DOCTYPE|ENTITY)/i.exec(text);
  if (forbidden) {
    throw new CaseError(
      'DRAWING_UNSAFE',
      `${file} declares a document type or entities, which are not followed`,
      { file, line: lineAt(text, forbidden.index) },
      'Delete the <!DOCTYPE …> part; the shapes do not need it',
    );
  }
  const verdict = XMLValidator.validate(text);
  if (verdict !== true) throw notXml(file, verdict.err.line, verdict.err.msg);
  const parser = new XMLParser({
    preserveOrder: true,
    ignoreAttributes: false,
    attributeNamePrefix: '',
    parseTagValue: false,
    parseAttributeValue: false,
    maxNestedTags: 64,
    captureMetaData: true,
  });
  try {
    const lines = lineStarts(text);
    return (parser.parse(text) as RawNode[]).flatMap((node) => elementOf(node, lines));
  } catch (cause) {
    if (cause instanceof CaseError) throw cause;
    throw notXml(file, undefined, 'it is nested deeper than 64 elements or damaged', cause);
  }
}

type RawNode = Record<string | symbol, unknown>;

function elementOf(node: RawNode, lines: readonly number[]): XmlElement[] {
  const tag = Object.keys(node).find((key) => key !== ':@');
  if (tag === undefined || tag === '#text' || tag.startsWith('?')) return [];
  const inside = node[tag] as RawNode[];
  const meta = node[XMLParser.getMetaDataSymbol() as symbol] as { startIndex?: number } | undefined;
  const raw = (node[':@'] ?? {}) as Record<string, unknown>;
  return [
    {
      tag: tag.replace(/^svg:/, ''),
      attributes: new Map(Object.entries(raw).map(([key, value]) => [key, String(value)])),
      children: inside.flatMap((child) => elementOf(child, lines)),
      text: inside.map((child) => ('#text' in child ? String(child['#text']) : '')).join(''),
      line: lineOf(lines, meta?.startIndex ?? 0),
    },
  ];
}

function notXml(file: string, line: number | undefined, why: string, cause?: unknown): CaseError {
  return new CaseError(
    'DRAWING_NOT_READ',
    `${file} is not a well-formed XML file: ${why.replace(/\.$/, '')}`,
    line === undefined ? { file } : { file, line },
    'Save the drawing again as plain SVG',
    cause,
  );
}

function lineStarts(text: string): number[] {
  const starts = [0];
  for (let i = text.indexOf('\n'); i >= 0; i = text.indexOf('\n', i + 1)) starts.push(i + 1);
  return starts;
}

function lineOf(starts: readonly number[], index: number): number {
  let low = 0;
  let high = starts.length;
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if ((starts[middle] ?? 0) <= index) low = middle;
    else high = middle;
  }
  return low + 1;
}

function lineAt(text: string, index: number): number {
  return lineOf(lineStarts(text), index);
}
