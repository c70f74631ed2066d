import type { PhysicsNumbers } from './physics-numbers.ts';

/** A number that the program stands behind: `low` and `high` are absent where nothing does (CASE.md). */
export interface Answer {
  readonly value: number;
  readonly low?: number;
  readonly high?: number;
  readonly kind: 'guaranteed' | 'estimate';
}

export interface AskedAnswer {
  readonly figure: string;
  readonly value?: number;
  readonly under?: number;
  readonly atLeast?: number;
  readonly verdict?: 'meets' | 'misses' | 'open';
  readonly margin?: { readonly value: number };
  /** Said where this version does not compute the figure. */
  readonly notAvailable?: true;
}

/** answers.json of one layout and one start (CASE.md); what is not computed is absent. */
export interface Answers {
  readonly tarry: 1;
  readonly case: string;
  readonly caseHash: string;
  readonly layout: string;
  readonly start: string;
  readonly units: { readonly length: string; readonly time: string } | 'none';
  /** As found by the solver, however the drift is stated; `warnings` says where it fails. */
  readonly reversible: boolean;
  /** With loss: of leaving or being lost, whichever is first. */
  readonly mean: Answer;
  /** By exit, and with loss `lost`; they sum to 1. */
  readonly shares: Readonly<Record<string, Answer>>;
  /**
   * By exit, per unit depth, in length²/time: without drift and loss, at a depth that is the same everywhere, and only
   * of exits that touch no other (METHODS 3).
   */
  readonly conductance?: Readonly<Record<string, Answer>>;
  readonly pins: Readonly<
    Record<string, { readonly mean: Answer; readonly shares: Readonly<Record<string, Answer>> }>
  >;
  readonly asked: readonly AskedAnswer[];
  readonly difference?: {
    readonly to: string;
    readonly value: number;
    readonly kind: 'guaranteed' | 'estimate';
  };
  readonly mesh: {
    readonly nodes: number;
    readonly triangles: number;
    readonly area: number;
    readonly minAngle: number;
    readonly chordError: number;
  };
  readonly numbers: PhysicsNumbers & {
    readonly roundingFloor: number;
    /** Edges of the mesh with a rate below zero. */
    readonly negativeRates: number;
  };
  readonly healed: readonly object[];
  readonly taken: readonly string[];
  readonly leftOut: readonly string[];
  readonly warnings: readonly string[];
  readonly cautions: readonly string[];
  readonly references: readonly string[];
  readonly made: {
    readonly version: string;
    readonly at: string;
    readonly command: string;
    readonly seconds: { readonly mesh: number; readonly solve: number };
  };
}
