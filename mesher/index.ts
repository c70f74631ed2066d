export {
  chordSag,
  curveLength,
  directionAt,
  nearestParameter,
  parameterAtLength,
  partOf,
  pointAt,
  reversed,
} from './curves.ts';
export type { Chain, Curve, Domain, Healing, Piece, Point } from './domain.ts';
export { type MesherCode, MesherError, type MesherWhere } from './errors.ts';
export type { Hooks } from './hooks.ts';
export { chainLength, enclosedArea } from './measure.ts';
export type { Mesh } from './mesh.ts';
export type { MeshOptions, SizeSource } from './options.ts';
