import type { Chain, Curve, Domain, Piece, Point } from '../../mesher/index.ts';

/** Drawings for the mesher's tests, in a few words. Tags count up from 0 in drawing order. */
export class Shapes {
  #tag = 0;

  polygon(name: string, points: readonly Point[]): Chain {
    return this.#chain(name, points, points.length);
  }

  open(name: string, points: readonly Point[]): Chain {
    return this.#chain(name, points, points.length - 1);
  }

  /** Counter-clockwise from its +x point. */
  circle(name: string, centre: Point, radius: number): Chain {
    const start: Point = [centre[0] + radius, centre[1]];
    const curve: Curve = {
      kind: 'arc',
      from: start,
      to: start,
      centre,
      radii: [radius, radius],
      turned: 0,
      start: 0,
      sweep: 2 * Math.PI,
    };
    return { name, pieces: [{ curve, tag: this.#tag++ }] };
  }

  curve(name: string, ...curves: readonly Curve[]): Chain {
    return { name, pieces: curves.map((curve) => ({ curve, tag: this.#tag++ })) };
  }

  #chain(name: string, points: readonly Point[], edges: number): Chain {
    const pieces: Piece[] = [];
    for (let i = 0; i < edges; i++) {
      const from = points[i] ?? [0, 0];
      const to = points[(i + 1) % points.length] ?? [0, 0];
      pieces.push({ curve: { kind: 'line', from, to }, tag: this.#tag++ });
    }
    return { name, pieces };
  }
}

export function domainOf(outline: Chain, parts: Partial<Omit<Domain, 'outline'>> = {}): Domain {
  return { outline, holes: [], innerWalls: [], regions: [], tolerance: 1e-12, ...parts };
}

export const unitSquare: readonly Point[] = [
  [0, 0],
  [1, 0],
  [1, 1],
  [0, 1],
];
