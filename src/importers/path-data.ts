import svgpath from 'svgpath';
import type { Curve, Point } from '../../mesher/index.ts';
import { arcFromEnds } from './elliptic-arc.ts';

/** One stroke of the pen in SVG path data, in the frame it is written in. */
export interface Subpath {
  readonly curves: readonly Curve[];
  /** Ended by Z; the closing line is among the curves unless it would have no length. */
  readonly closed: boolean;
}

export interface PathReading {
  readonly subpaths: readonly Subpath[];
  /** What cannot be read, in words; the subpaths before it are given all the same. */
  readonly problem?: string;
}

/**
 * SVG path data as curves: arcs stay arcs, quadratic Béziers are raised to cubic ones.
 *
 * Source: W3C, SVG 1.1 (second edition, 2011), chapter 8.3.
 */
export function readPathData(text: string): PathReading {
  const repeated = withRepeatedLetters(text);
  if (repeated === undefined)
    return { subpaths: [], problem: 'one A draws too many arcs; repeat the letter' };
  const path = svgpath(repeated);
  const found = (path as unknown as { err: string }).err;
  const subpaths: Subpath[] = [];
  let curves: Curve[] = [];
  let start: Point = [0, 0];
  let at: Point = [0, 0];
  let finite = true;
  const end = (closed: boolean): void => {
    if (curves.length > 0) subpaths.push({ curves, closed });
    curves = [];
  };
  const draw = (to: Point, curve: Curve | undefined): void => {
    if (curve) curves.push(curve);
    at = to;
  };
  path
    .abs()
    .unshort()
    .iterate((segment) => {
      // Own reading of the pen's place: the library's does not follow Z.
      const numbers = segment.slice(1) as number[];
      if (!numbers.every(Number.isFinite)) finite = false;
      const [a = 0, b = 0, c = 0, d = 0, e = 0, f = 0, g = 0] = numbers;
      switch (segment[0]) {
        case 'M':
          end(false);
          start = [a, b];
          at = start;
          break;
        case 'L':
          draw([a, b], { kind: 'line', from: at, to: [a, b] });
          break;
        case 'H':
          draw([a, at[1]], { kind: 'line', from: at, to: [a, at[1]] });
          break;
        case 'V':
          draw([at[0], a], { kind: 'line', from: at, to: [at[0], a] });
          break;
        case 'C':
          draw([e, f], cubic(at, [a, b], [c, d], [e, f]));
          break;
        case 'Q':
          draw([c, d], raised(at, [a, b], [c, d]));
          break;
        case 'A':
          draw(
            [f, g],
            arcFromEnds({
              from: at,
              to: [f, g],
              radii: [a, b],
              turned: c,
              large: d !== 0,
              positive: e !== 0,
            }),
          );
          break;
        case 'Z':
        case 'z':
          if (at[0] !== start[0] || at[1] !== start[1]) curves.push({ kind: 'line', from: at, to: start });
          end(true);
          at = start;
          break;
      }
    });
  end(false);
  if (found) return { subpaths, problem: whereInText(found, repeated) };
  if (!finite) return { subpaths: [], problem: 'the path has a number that is too large' };
  return { subpaths };
}

/** A Bézier curve, or nothing when all its points are one. */
function cubic(from: Point, c1: Point, c2: Point, to: Point): Curve | undefined {
  const moves = [c1, c2, to].some((p) => p[0] !== from[0] || p[1] !== from[1]);
  return moves ? { kind: 'cubic', from, to, controls: [c1, c2] } : undefined;
}

/** A quadratic Bézier curve as a cubic one: controls two thirds of the way to the quadratic's (degree elevation). */
function raised(from: Point, control: Point, to: Point): Curve | undefined {
  const toward = (p: Point): Point => [
    p[0] + (2 / 3) * (control[0] - p[0]),
    p[1] + (2 / 3) * (control[1] - p[1]),
  ];
  return cubic(from, toward(from), toward(to), to);
}

/** Longest run of numbers behind one letter that is handed on as it is, in characters. */
const longRun = 4000;
const longestArcs = 100_000;

/** Numbers that each letter takes; A is not among them as its flags may be written without a space. */
const counts: Readonly<Record<string, number>> = { m: 2, l: 2, h: 1, v: 1, c: 6, s: 4, q: 4, t: 2 };

/**
 * The same path with its letters repeated within long runs: the library's time grows with the square of a run.
 * A run with something else than numbers stays as it is, for the library to say where.
 */
function withRepeatedLetters(text: string): string | undefined {
  if (text.length <= longRun) return text;
  let tooLong = false;
  const repeated = text.replace(
    /([a-df-zA-DF-Z])([^a-df-zA-DF-Z]*)/g,
    (run: string, letter: string, rest: string) => {
      if (run.length <= longRun) return run;
      const count = counts[letter.toLowerCase()];
      if (count === undefined) {
        tooLong ||= run.length > longestArcs;
        return run;
      }
      if (!/^[-+\d.eE\s,]*$/.test(rest)) return run;
      const numbers = rest.match(/[-+]?(?:\d+\.?\d*|\.\d+)(?:[eE][-+]?\d+)?/g) ?? [];
      const parts: string[] = [];
      let name = letter;
      for (let i = 0; i < numbers.length; i += count) {
        parts.push(name, ...numbers.slice(i, i + count));
        // After the first pair a moveto goes on as lineto.
        if (i === 0 && letter === 'M') name = 'L';
        if (i === 0 && letter === 'm') name = 'l';
      }
      return `${parts.join(' ')} `;
    },
  );
  return tooLong ? undefined : repeated;
}

function whereInText(message: string, text: string): string {
  const position = Number(/at pos (\d+)/.exec(message)?.[1] ?? Number.NaN);
  if (!Number.isFinite(position)) return 'the path does not begin with M';
  const near = text.slice(position, position + 12).trim();
  return near === ''
    ? 'the path ends in the middle of a command'
    : `the path cannot be read at character ${position + 1}, "${near}"`;
}
