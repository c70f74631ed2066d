import type { FoundShape } from './found-shape.ts';
import { type Outlined, outlined, sideOf } from './nesting.ts';

/** What each shape of a file stands for; those that stand for nothing are left out. */
export interface Roles {
  readonly outline: FoundShape;
  readonly holes: readonly FoundShape[];
  /** Closed shapes that are neither, with why. */
  readonly others: readonly { readonly shape: FoundShape; readonly why: string }[];
  /** True when nobody named the outline. */
  readonly proposed: boolean;
}

/** Why no outline can be told, and the shapes it could be. */
export interface Unclear {
  readonly unclear: string;
  readonly candidates: readonly FoundShape[];
}

/**
 * Tells outline and holes among the closed shapes of a file.
 *
 * Without `outline` the largest closed shape with others inside is proposed, or the only closed one. Closed shapes
 * inside it, or across its line, are holes (those across are refused later, with the places); the rest is outside.
 */
export function tellRoles(shapes: readonly FoundShape[], outline?: FoundShape): Roles | Unclear {
  const closed = shapes.filter((shape) => shape.closed).map(outlined);
  const proposal = outline ? closed.find(({ shape }) => shape === outline) : proposedOutline(closed);
  if (!proposal) return { unclear: 'no shape in it is closed', candidates: [] };
  if ('unclear' in proposal) return proposal;
  const holes: FoundShape[] = [];
  const others: { shape: FoundShape; why: string }[] = [];
  for (const each of closed) {
    if (each === proposal) continue;
    const side = sideOf(each, proposal);
    const around = side === 'outside' ? sideOf(proposal, each) : 'outside';
    if (side !== 'outside' || around === 'across') holes.push(each.shape);
    else if (around === 'inside') others.push({ shape: each.shape, why: 'around the outline' });
    else others.push({ shape: each.shape, why: 'outside the outline' });
  }
  return { outline: proposal.shape, holes, others, proposed: outline === undefined };
}

function proposedOutline(closed: readonly Outlined[]): Outlined | Unclear | undefined {
  if (closed.length <= 1) return closed[0];
  const bySize = [...closed].sort((a, b) => b.area - a.area);
  const hasInside = (one: Outlined): boolean =>
    closed.some((other) => other !== one && sideOf(other, one) === 'inside');
  const at = bySize.findIndex(hasInside);
  const first = bySize[at];
  if (!first) {
    return {
      unclear: 'none of its closed shapes has another inside',
      candidates: closed.map(({ shape }) => shape),
    };
  }
  const rivals = bySize.slice(at + 1).filter(({ area }) => area > first.area * (1 - 1e-9));
  const second = rivals.find(hasInside);
  if (second) {
    return {
      unclear: `"${first.shape.name}" and "${second.shape.name}" are equally large`,
      candidates: [first.shape, second.shape],
    };
  }
  return first;
}
