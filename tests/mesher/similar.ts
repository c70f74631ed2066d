import type { Chain, Curve, Domain, Point } from '../../mesher/index.ts';

/** The same drawing turned by `angle` (radians) about the origin, moved by `by` (in old lengths), scaled by `scale`. */
export function similar(domain: Domain, angle: number, by: Point, scale: number): Domain {
  const c = Math.cos(angle);
  const s = Math.sin(angle);
  const place = ([x, y]: Point): Point => [scale * (c * x - s * y + by[0]), scale * (s * x + c * y + by[1])];
  const curve = (old: Curve): Curve => {
    const from = place(old.from);
    const to = place(old.to);
    switch (old.kind) {
      case 'line':
        return { kind: 'line', from, to };
      case 'arc': {
        const radii: [number, number] = [scale * old.radii[0], scale * old.radii[1]];
        return { ...old, from, to, centre: place(old.centre), radii, turned: old.turned + angle };
      }
      case 'cubic':
        return { kind: 'cubic', from, to, controls: [place(old.controls[0]), place(old.controls[1])] };
    }
  };
  const chain = (old: Chain): Chain => ({
    name: old.name,
    pieces: old.pieces.map((piece) => ({ curve: curve(piece.curve), tag: piece.tag })),
  });
  return {
    outline: chain(domain.outline),
    holes: domain.holes.map(chain),
    innerWalls: domain.innerWalls.map(chain),
    regions: domain.regions.map(chain),
    tolerance: scale * domain.tolerance,
  };
}
