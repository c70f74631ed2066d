import fc from 'fast-check';
import { expect, it } from 'vitest';
import {
  chevronCount,
  chevrons,
  dotPlaces,
  GLYPH_SCALE,
  glyphSizes,
  markStroke,
} from '../../viewer/plan/glyphs.ts';
import { lengthsAlong, type Px, placesAt, refined } from '../../viewer/plan/polyline.ts';

const plain = { weak: false, post: false };

function ring(radius: number): Px[] {
  // Clockwise on the page whose y points down is counter-clockwise in the case: a hole runs the other way.
  return Array.from({ length: 73 }, (_, i): Px => {
    const angle = (i * Math.PI) / 36;
    return [radius * Math.cos(angle), radius * Math.sin(angle)];
  });
}

it('sizes follow the scale factor and never fall under their floors (LOOK, wall glyphs)', () => {
  const plan = glyphSizes(GLYPH_SCALE.plan);
  expect(plan).toMatchObject({ turnsBack: 3, pitch: 9, casing: 3.25 });
  expect(plan.catches).toBeCloseTo(1.375, 9);
  expect(plan.gap).toBeCloseTo(3.05, 9);
  const tiny = glyphSizes(0.5);
  expect(tiny).toMatchObject({ catches: 0.9, halfWidth: 1.9, height: 2.1, stroke: 1, pitch: 5.4 });
  expect(tiny.dot).toBeCloseTo(2.3 * 0.8, 9);
});

it('the number of chevrons is the length over the pitch, rounded, at least one; weak ones at twice the pitch', () => {
  const sizes = glyphSizes(1.25);
  expect(chevronCount(90, sizes, plain)).toBe(10);
  expect(chevronCount(94.4, sizes, plain)).toBe(10);
  expect(chevronCount(2, sizes, plain)).toBe(1);
  expect(chevronCount(90, sizes, { weak: true, post: false })).toBe(5);
});

it('a whole post has at least eight chevrons, four when it catches weakly', () => {
  const sizes = glyphSizes(1.25);
  expect(chevronCount(20, sizes, { weak: false, post: true })).toBe(8);
  expect(chevronCount(20, sizes, { weak: true, post: true })).toBe(4);
  expect(chevronCount(180, sizes, { weak: false, post: true })).toBe(20);
});

it('chevrons stand evenly, feet off the wall, apex away from the compartment', () => {
  const sizes = glyphSizes(1.25);
  // From left to right on a page whose y points down, the compartment on the left lies above: outside is below.
  const marks = chevrons(
    [
      [0, 0],
      [90, 0],
    ],
    sizes,
    plain,
  );
  expect(marks).toHaveLength(10);
  marks.forEach(({ feet, apex }, i) => {
    expect(apex[0]).toBeCloseTo(9 * (i + 0.5), 9);
    expect(apex[1]).toBeCloseTo(sizes.gap + sizes.height, 9);
    expect(feet[0]).toEqual([expect.closeTo(apex[0] - sizes.halfWidth, 9), expect.closeTo(sizes.gap, 9)]);
    expect(feet[1][0] - feet[0][0]).toBeCloseTo(2 * sizes.halfWidth, 9);
  });
});

it('chevrons of a post point into it, and are small on a post of radius under 8 px', () => {
  const sizes = glyphSizes(1.25);
  for (const { apex } of chevrons(ring(30), sizes, { weak: false, post: true })) {
    expect(Math.hypot(...apex)).toBeLessThan(30 - sizes.gap);
  }
  for (const { feet, apex } of chevrons(ring(6), sizes, { weak: false, post: true })) {
    expect(Math.hypot(feet[1][0] - feet[0][0], feet[1][1] - feet[0][1])).toBeCloseTo(3, 1);
    expect(6 - Math.hypot(...apex)).toBeCloseTo(3, 1);
  }
});

it('neighbouring chevrons never touch, so the row does not close into sawtooth', () => {
  fc.assert(
    fc.property(
      fc.double({ min: 0.5, max: 2, noNaN: true }),
      fc.double({ min: 30, max: 900, noNaN: true }),
      (k, length) => {
        const sizes = glyphSizes(k);
        const marks = chevrons(
          [
            [0, 0],
            [length, 0],
          ],
          sizes,
          plain,
        );
        const apart = marks.slice(1).map(({ feet }, i) => feet[0][0] - (marks[i]?.feet[1][0] ?? 0));
        expect(marks.length).toBeGreaterThan(1);
        for (const gap of apart) expect(gap).toBeGreaterThan(0.3);
      },
    ),
  );
});

it('dots of a weakly catching wall keep near their pitch of 4.4 k', () => {
  const sizes = glyphSizes(1);
  expect(
    dotPlaces(
      [
        [0, 0],
        [44, 0],
      ],
      sizes,
    ),
  ).toHaveLength(10);
  expect(
    dotPlaces(
      [
        [0, 0],
        [1, 0],
      ],
      sizes,
    ),
  ).toHaveLength(1);
});

it('the mark of s = 0 reaches 5k + 1 px in and 6k + 2 px out, and 5 px each way on posts', () => {
  expect(markStroke([10, 10], [0, 1], 1.25, false)).toEqual([
    [10, 10 - 7.25],
    [10, 10 + 9.5],
  ]);
  expect(markStroke([0, 0], [1, 0], 1.25, true)).toEqual([
    [-5, 0],
    [5, 0],
  ]);
});

it('places along a line lie at the lengths asked for', () => {
  const line: Px[] = [
    [0, 0],
    [3, 4],
    [3, 10],
  ];
  expect(lengthsAlong(line)).toEqual([0, 5, 11]);
  const [first, second] = placesAt(line, [2.5, 8]);
  expect(first?.at).toEqual([1.5, 2]);
  expect(second).toEqual({ at: [3, 7], along: [0, 1] });
});

it('refining keeps the corners and the length', () => {
  const fine = refined(
    [
      [0, 0],
      [10, 0],
      [10, 3],
    ],
    2,
  );
  expect(fine).toHaveLength(8);
  expect(fine).toContainEqual([10, 0]);
  expect(lengthsAlong(fine).at(-1)).toBeCloseTo(13, 9);
});
