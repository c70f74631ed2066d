export { type SolverCode, SolverError, type SolverWhere } from './errors.ts';
export type { Coefficient, Medium, NoiseConvention, Problem, Wall } from './problem/problem.ts';
