import { describe, expect, it } from 'vitest';
import {
  type Domain,
  enclosedArea,
  healDomain,
  MesherError,
  meshDomain,
  meshQuality,
} from '../../mesher/index.ts';
import { domainOf, Shapes, unitSquare } from './shapes.ts';

function refused(domain: Domain): MesherError {
  try {
    healDomain(domain);
  } catch (error) {
    if (error instanceof MesherError) return error;
    throw error;
  }
  throw new Error('was not refused');
}

describe('single loops', () => {
  it('keeps the first point first when the outline is turned round, and the tags with their walls', () => {
    const s = new Shapes();
    const drawn = s.polygon('outline', [...unitSquare].reverse());
    const { domain, healed } = healDomain(domainOf(drawn));
    expect(healed).toEqual([{ what: 'orientation', loop: 'outline', at: [0, 1] }]);
    expect(domain.outline.pieces[0]?.curve.from).toEqual([0, 1]);
    expect(domain.outline.pieces.map((p) => p.tag)).toEqual([3, 2, 1, 0]);
    expect(enclosedArea(domain.outline)).toBeCloseTo(1, 14);
  });

  it('closes a gap within the tolerance and says where, and refuses a wider one', () => {
    const s = new Shapes();
    const chain = s.polygon('outline', unitSquare);
    const pieces = chain.pieces.map((p, i) =>
      i === 2 ? { ...p, curve: { kind: 'line', from: p.curve.from, to: [0, 1 + 1e-4] } as const } : p,
    );
    const gapped = { name: 'outline', pieces };
    const { domain, healed } = healDomain(domainOf(gapped, { tolerance: 2e-4 }));
    expect(healed).toEqual([{ what: 'gap closed', loop: 'outline', at: [0, 1 + 1e-4] }]);
    expect(domain.outline.pieces[3]?.curve.from).toEqual(domain.outline.pieces[2]?.curve.to);
    const error = refused(domainOf(gapped, { tolerance: 5e-5 }));
    expect(error.code).toBe('LOOP_OPEN');
    expect(error.where).toEqual({
      at: [
        [0, 1 + 1e-4],
        [0, 1],
      ],
      loops: ['outline'],
    });
  });

  it('names the hole that stands for one given twice, even from another first point and turned round', () => {
    const s = new Shapes();
    const points = [
      [0.2, 0.2],
      [0.4, 0.2],
      [0.3, 0.4],
    ] as const;
    const holes = [
      s.polygon('left', points),
      s.polygon('copy', [points[1], points[0], points[2]]),
      s.polygon(
        'elsewhere',
        points.map(([x, y]) => [x + 0.4, y] as const),
      ),
    ];
    const { domain, healed } = healDomain(domainOf(s.polygon('outline', unitSquare), { holes }));
    expect(domain.holes.map((h) => h.name)).toEqual(['left', 'elsewhere']);
    const twice = healed.filter((h) => h.what === 'hole given twice');
    expect(twice.map((h) => [h.loop, h.keptAs])).toEqual([['copy', 'left']]);
  });
});

describe('loops that meet', () => {
  it('cuts a wall where a corner of a hole stands on it', () => {
    const s = new Shapes();
    const hole = s.polygon('post', [
      [0.5, 0],
      [0.7, 0.3],
      [0.3, 0.3],
    ]);
    const { domain, healed } = healDomain(domainOf(s.polygon('outline', unitSquare), { holes: [hole] }));
    expect(healed.filter((h) => h.what === 'contact')).toEqual([
      { what: 'contact', loop: 'outline', at: [0.5, 0] },
    ]);
    expect(meshQuality(meshDomain(domain)).area).toBeCloseTo(1 - 0.06, 13);
  });

  it('takes a post within the tolerance of a wall as touching it', () => {
    const s = new Shapes();
    const hole = s.polygon('post', [
      [0.5, 1e-7],
      [0.7, 0.3],
      [0.3, 0.3],
    ]);
    const outline = s.polygon('outline', unitSquare);
    const near = healDomain(domainOf(outline, { holes: [hole], tolerance: 1e-6 }));
    expect(near.healed.map((h) => h.what)).toContain('contact');
    const apart = healDomain(domainOf(outline, { holes: [hole], tolerance: 1e-8 }));
    expect(apart.healed.map((h) => h.what)).not.toContain('contact');
  });

  it('lets a round post touch a wall, another post and the round outline in a point', () => {
    const s = new Shapes();
    const angle = 2;
    const touchingRim = s.circle('in rim', [0.75 * Math.cos(angle), 0.75 * Math.sin(angle)], 0.25);
    const a = s.circle('a', [0.1, -0.2], 0.2);
    const b = s.circle('b', [0.1 + 0.3 * Math.cos(0.7), -0.2 + 0.3 * Math.sin(0.7)], 0.1);
    const { domain, healed } = healDomain(
      domainOf(s.circle('rim', [0, 0], 1), { holes: [touchingRim, a, b] }),
    );
    const contacts = healed.filter((h) => h.what === 'contact').map((h) => h.at);
    expect(contacts).toHaveLength(2);
    const places = [
      [Math.cos(2), Math.sin(2)],
      [0.1 + 0.2 * Math.cos(0.7), -0.2 + 0.2 * Math.sin(0.7)],
    ];
    for (const [x = 0, y = 0] of places) {
      expect(Math.min(...contacts.map((c) => Math.hypot(c[0] - x, c[1] - y)))).toBeLessThan(1e-12);
    }
    expect(meshQuality(meshDomain(domain)).minAngleElsewhere).toBeGreaterThanOrEqual(28);
  });
});

describe('loops that may not meet', () => {
  it('tells round walls that just cross from round walls that just miss', () => {
    const s = new Shapes();
    const outline = s.polygon('outline', unitSquare);
    const post = (gap: number): Domain =>
      domainOf(outline, { holes: [s.circle('post', [0.43, 0.2 + gap], 0.2)] });
    expect(healDomain(post(1e-7)).healed.map((h) => h.what)).toEqual(['orientation']);
    const error = refused(post(-1e-7));
    expect(error.code).toBe('WALLS_CROSS');
    // Both crossings, where the circle of radius r dips d below the wall: half the chord is √(2rd).
    const half = Math.sqrt(2 * 0.2 * 1e-7);
    const xs = (error.where.at ?? []).map((p) => p[0]).sort((p, q) => p - q);
    expect(xs).toHaveLength(2);
    expect(Math.abs((xs[0] ?? 0) - (0.43 - half))).toBeLessThan(1e-8);
    expect(Math.abs((xs[1] ?? 0) - (0.43 + half))).toBeLessThan(1e-8);
  });

  it('refuses loops that change sides in a common corner', () => {
    const s = new Shapes();
    const outline = s.polygon('outline', unitSquare);
    const a = s.polygon('a', [
      [0.5, 0.5],
      [0.2, 0.4],
      [0.5, 0.2],
      [0.8, 0.4],
    ]);
    const b = s.polygon('b', [
      [0.5, 0.5],
      [0.5, 0.35],
      [0.9, 0.8],
    ]);
    const error = refused(domainOf(outline, { holes: [a, b] }));
    expect(error.code).toBe('WALLS_CROSS');
    expect(error.where.at).toContainEqual([0.5, 0.5]);
  });

  it('reports an inner wall that lies outside, and one that runs along a wall', () => {
    const s = new Shapes();
    const outline = s.polygon('outline', unitSquare);
    const outside = s.open('far', [
      [2, 2],
      [3, 3],
    ]);
    expect(refused(domainOf(outline, { innerWalls: [outside] })).code).toBe('INNER_WALL_OUTSIDE');
    const along = s.open('along', [
      [0.2, 0],
      [0.8, 0],
    ]);
    expect(refused(domainOf(outline, { innerWalls: [along] })).code).toBe('WALLS_OVERLAP');
  });
});
