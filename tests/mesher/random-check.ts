import { checkMesh, healDomain, meshDomain, meshQuality } from '../../mesher/index.ts';
import { randomDrawing } from './random-drawing.ts';

/** What was found over many random drawings. */
export interface RandomFindings {
  /** Drawing and what is wrong: anything thrown, any broken promise of a mesh. */
  readonly faults: string[];
  /** Drawings with an angle below 28° away from sharp corners. */
  readonly below: string[];
  readonly triangles: number;
}

/**
 * Meshes random drawings and checks each mesh.
 *
 * An angle below the goal away from sharp corners is a fault, but for drawings in which a region border or an inner
 * wall makes a corner sharper than 7° with both its sides meshed: half a turn of triangles of 28° cannot bridge the
 * ratio of the wall pieces on the two sides of such a corner's first shell (see refine-fully.ts).
 */
export function meshRandomDrawings(from: number, to: number): RandomFindings {
  const faults: string[] = [];
  const below: string[] = [];
  let triangles = 0;
  for (let seed = from; seed <= to; seed++) {
    const { domain, summary } = randomDrawing(seed);
    try {
      const sound = healDomain(domain).domain;
      const mesh = meshDomain(sound);
      const quality = meshQuality(mesh);
      triangles += quality.triangles;
      const broken = checkMesh(mesh, sound);
      if (broken.length > 0) faults.push(`${summary}: ${broken.join('; ')}`);
      if (quality.minAngleElsewhere >= 28) continue;
      const twoSided = domain.innerWalls.length + domain.regions.length > 0;
      const report = `${summary}: ${quality.minAngleElsewhere} beside a corner of ${quality.minAngle}`;
      if (twoSided && quality.minAngle < 7) below.push(report);
      else faults.push(report);
    } catch (error) {
      faults.push(`${summary}: ${String(error)}`);
    }
  }
  return { faults, below, triangles };
}
