import { boxOf, type FoundDrawing, type FoundShape } from '../importers/found-shape.ts';
import { tellRoles } from '../importers/roles.ts';
import type { DrawingView } from './contract.ts';

type Role = DrawingView['shapes'][number]['role'];

/** What the page says about a drawing before a case is made of it. */
export function drawingView({ shapes, physicalScale, leftOut }: FoundDrawing): DrawingView {
  const roles = tellRoles(shapes);
  const roleOf = (shape: FoundShape): Role => {
    if ('unclear' in roles) return undefined;
    if (shape === roles.outline) return 'outline';
    return roles.holes.includes(shape) ? 'hole' : undefined;
  };
  return {
    shapes: shapes.map((shape) => {
      const [low, high] = boxOf(shape.curves);
      const role = roleOf(shape);
      return {
        name: shape.name,
        closed: shape.closed,
        ...(role !== undefined && { role }),
        size: [high[0] - low[0], high[1] - low[1]],
      };
    }),
    ...(physicalScale !== undefined && { drawingUnit: `${physicalScale.value} ${physicalScale.unit}` }),
    notes: 'unclear' in roles ? [`No outline can be told: ${roles.unclear}`, ...leftOut] : [...leftOut],
  };
}
