import type { PhysicsNumbers } from './physics-numbers.ts';

/** A number that the program stands behind: `low` and `high` are absent where nothing does (CASE.md). */
export interface Answer {
  readonly value: number;
  readonly low?: number;
  readonly high?: number;
  readonly kind: 'guaranteed' | 'estimate';
}

/** A time that is never reached: no more than the fraction `atMost` ever gets there. */
export interface Never {
  readonly value: null;
  readonly never: { readonly atMost: number };
  readonly kind: Answer['kind'];
}

/** The time by which some part has left, where it ever does. */
export type TimeAnswer = Answer | Never;

/** Times to 50, 90, 95 and 99 %, by '50 %' and so on. */
export type Times = Readonly<Record<string, TimeAnswer>>;

/** A share, with the mean time of those that end there; without it where none does. */
export interface ShareAnswer extends Answer {
  readonly meanTime?: number;
}

/** What is answered at a place as for a start. */
export interface Reading {
  /** With loss: of leaving or being lost, whichever is first. */
  readonly mean: Answer;
  /** Left out where the second moment is beyond the largest number, as after wells of 350 kT. */
  readonly sd?: Answer;
  /** Left out where the decay cannot be followed in double precision. */
  readonly times?: Times;
  /** By exit, and with loss `lost`; they sum to 1. */
  readonly shares: Readonly<Record<string, ShareAnswer>>;
}

export interface AskedAnswer {
  readonly figure: string;
  /** Time in the case's unit or fraction; null for a time that is never reached; absent where `warnings` says why. */
  readonly value?: number | null;
  readonly never?: Never['never'];
  readonly low?: number;
  readonly high?: number;
  readonly kind?: Answer['kind'];
  /** As asked: of those that are caught, not lost. */
  readonly counts?: 'caught';
  readonly under?: number;
  readonly atLeast?: number;
  readonly verdict?: 'meets' | 'misses' | 'open';
  readonly margin?: { readonly value: number };
}

/** answers.json of one layout and one start (CASE.md); what is not computed is absent. */
export interface Answers extends Reading {
  readonly tarry: 1;
  readonly case: string;
  readonly caseHash: string;
  readonly layout: string;
  readonly start: string;
  readonly units: { readonly length: string; readonly time: string } | 'none';
  /** As found by the solver, however the drift is stated; `warnings` says where it fails. */
  readonly reversible: boolean;
  /** E[τⁿ] for n = 1, 2, …, in the time unit to that power; as many as the case asks for, two without. */
  readonly moments: readonly Answer[];
  /** Inverse of the slowest rate of leaving: later on, half are gone after each ln 2 of it. */
  readonly decayTime?: Answer;
  /** Chance of being inside still, at the times the case asks for and in their order. */
  readonly survival?: readonly ({ readonly t: number } & Answer)[];
  /** By region the case asks for: mean time spent there, and what part of the mean time that is. */
  readonly occupation?: Readonly<Record<string, Answer & { readonly fraction: number }>>;
  /**
   * By exit, per unit depth, in length²/time: without drift and loss, at a depth that is the same everywhere, and only
   * of exits that touch no other (METHODS 3).
   */
  readonly conductance?: Readonly<Record<string, Answer>>;
  readonly pins: Readonly<Record<string, Reading>>;
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
