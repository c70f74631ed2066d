export { checkMesh } from './check-mesh.ts';
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
export { healDomain } from './heal.ts';
export type { Hooks } from './hooks.ts';
export { type Located, type Locator, locate, type NearestWall } from './locate.ts';
export { chainLength, enclosedArea } from './measure.ts';
export type { Mesh } from './mesh.ts';
export { meshDefaults, meshDomain, remesh } from './mesh-domain.ts';
export type { MeshOptions, SizeSource } from './options.ts';
export { type ConnectedPieces, connectedPieces } from './pieces.ts';
export { placeText } from './place-text.ts';
export { type MeshQuality, meshQuality } from './quality.ts';
