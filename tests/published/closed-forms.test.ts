import { describe, expect, it } from 'vitest';
import { arcAverage, arcExitTime } from './arc-exit-time.ts';
import { listed, listedChecks } from './listed.ts';
import { rectangleAverage, rectangleExitTime, rectangleFlux } from './rectangle-exit-time.ts';
import { sectorExitTime, wedgeExitTime } from './sector-exit-time.ts';

/** The formulas of this folder against the listed values, which were computed elsewhere by other methods. */
describe('closed forms', () => {
  it('one absorbing arc: the formula gives the listed times at every listed place', () => {
    const angles = {
      'disk-arc-0.05': 0.05,
      'disk-arc-0.1': 0.1,
      'disk-arc-pi_6': Math.PI / 6,
      'disk-arc-pi_2': Math.PI / 2,
    };
    for (const [id, eps] of Object.entries(angles)) {
      expect(arcExitTime(0, 0, eps)).toBeCloseTo(listed(id, 'u(0,0)'), 12);
      expect(arcExitTime(-1, 0, eps)).toBeCloseTo(listed(id, 'u(-1,0)'), 12);
      expect(arcExitTime(0.5, 0, eps)).toBeCloseTo(listed(id, 'u(0.5,0)'), 12);
      expect(arcExitTime(0, 0.5, eps)).toBeCloseTo(listed(id, 'u(0,0.5)'), 12);
      expect(arcExitTime(-0.5, 0, eps)).toBeCloseTo(listed(id, 'u(-0.5,0)'), 12);
      expect(arcAverage(eps)).toBeCloseTo(listed(id, 'avg'), 12);
    }
  });

  it('several absorbing arcs: the formula gives the listed times', () => {
    const half = Math.SQRT1_2;
    expect(arcExitTime(0, 1, 0.1, 2)).toBeCloseTo(listed('disk-2arcs-0.1', 'u(rim midway)'), 12);
    expect(arcExitTime(0.5, 0, 0.1, 2)).toBeCloseTo(listed('disk-2arcs-0.1', 'u(0.5,0)'), 12);
    expect(arcAverage(0.1, 2)).toBeCloseTo(listed('disk-2arcs-0.1', 'avg'), 12);
    expect(arcExitTime(half, half, Math.PI / 16, 4)).toBeCloseTo(
      listed('disk-4arcs-pi_16', 'u(rim midway)'),
      12,
    );
    expect(arcExitTime(0.5, 0, Math.PI / 16, 4)).toBeCloseTo(listed('disk-4arcs-pi_16', 'u(0.5,0)'), 12);
  });

  it('rectangles: the series gives the listed times, averages and wall fluxes', () => {
    const rectangles = listedChecks.filter(({ id }) => id.startsWith('rect-A-'));
    expect(rectangles).toHaveLength(6);
    for (const { id } of rectangles) {
      const a = Number(id.slice('rect-A-'.length));
      expect(rectangleExitTime(a, 1, a / 2, 0.5)).toBeCloseTo(listed(id, 'u(centre)'), 9);
      expect(rectangleExitTime(a, 1, a / 4, 0.25)).toBeCloseTo(listed(id, 'quarter point u'), 9);
      expect(rectangleAverage(a, 1)).toBeCloseTo(listed(id, 'avg'), 10);
      expect(rectangleFlux(a, 1, 1e-6)).toBeCloseTo(listed(id, 'flux mid long side'), 5);
    }
  });

  it('sectors and wedges: the series gives the listed times', () => {
    expect(sectorExitTime(Math.PI / 3, 1, 0.5)).toBeCloseTo(listed('sector-A-60deg', 'u(r=0.5 on axis)'), 12);
    expect(sectorExitTime(Math.PI, 1, 0.5)).toBeCloseTo(
      listed('sector-A-semicircle', 'u(r=0.5 on axis)'),
      12,
    );
    expect(wedgeExitTime(Math.PI / 4, 1)).toBeCloseTo(listed('wedge-fact', 'u(r=1,axis), a=45deg'), 12);
  });
});
