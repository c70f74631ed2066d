import { readdirSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import type { Point } from '../../mesher/index.ts';
import {
  checkMesh,
  type Domain,
  healDomain,
  MesherError,
  meshDomain,
  meshQuality,
} from '../../mesher/index.ts';
import { Shapes } from './shapes.ts';

/** The hard geometries of tests/data/nasty: each file says which verdict it must get. */
interface Nasty {
  readonly name: string;
  readonly outline: Point[];
  readonly holes: Point[][];
  readonly lines?: Point[][];
  readonly expect: 'ok' | 'healed' | 'refused';
  readonly message?: string;
  readonly area?: number;
}

const folder = new URL('../data/nasty/', import.meta.url);
const files = readdirSync(folder).filter((file) => file.endsWith('.json'));

function read(file: string): { nasty: Nasty; domain: Domain } {
  const nasty = JSON.parse(readFileSync(new URL(file, folder), 'utf8')) as Nasty;
  const shapes = new Shapes();
  const finite = nasty.outline.filter((p) => p.every(Number.isFinite));
  const span = (axis: 0 | 1): number =>
    Math.max(...finite.map((p) => p[axis])) - Math.min(...finite.map((p) => p[axis]));
  const domain: Domain = {
    outline: shapes.polygon('outline', nasty.outline),
    holes: nasty.holes.map((hole, i) => shapes.polygon(`hole ${i + 1}`, hole)),
    innerWalls: (nasty.lines ?? []).map((line, i) => shapes.open(`inner wall ${i + 1}`, line)),
    regions: [],
    tolerance: 1e-12 * Math.hypot(span(0), span(1)),
  };
  return { nasty, domain };
}

function refusal(domain: Domain): MesherError {
  try {
    meshDomain(healDomain(domain).domain);
  } catch (error) {
    if (error instanceof MesherError) return error;
    throw error;
  }
  throw new Error('was not refused');
}

describe('every hard geometry gets its verdict', () => {
  it('finds all 31 files', () => {
    expect(files).toHaveLength(31);
  });

  it.each(files)('%s', (file) => {
    const { nasty, domain } = read(file);
    if (nasty.expect === 'refused') {
      const error = refusal(domain);
      expect(error.message).toContain(nasty.message);
      if (nasty.message !== 'finite' && nasty.message !== 'triangles') expect(error.where.at).not.toEqual([]);
      return;
    }
    const { domain: sound, healed } = healDomain(domain);
    if (nasty.expect === 'healed') expect(healed.map((h) => h.what).join()).toContain(nasty.message);
    const mesh = meshDomain(sound);
    const quality = meshQuality(mesh);
    expect(checkMesh(mesh, sound)).toEqual([]);
    expect(Math.abs(quality.area / (nasty.area ?? 0) - 1)).toBeLessThan(1e-12);
    expect(quality.minAngleElsewhere).toBeGreaterThanOrEqual(28);
  });
});
