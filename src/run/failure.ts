import { MesherError } from '../../mesher/index.ts';
import { SolverError } from '../../solver/index.ts';
import { CaseError, type Where } from '../case/errors.ts';

/**
 * Why a piece of work gave no answer, as plain data that crosses a thread: `case` the case is at fault, `limit` a
 * limit of time or memory was reached, `stopped` someone asked for the end, `fault` the program is at fault.
 */
export interface Failure {
  readonly kind: 'case' | 'limit' | 'stopped' | 'fault';
  readonly code: string;
  readonly what: string;
  readonly where: Where;
  readonly remedy: string;
  /** For our own log, never shown to a user: the trace of a fault. */
  readonly trace?: string;
}

/** A {@link Failure} as an error: what a promise of work is rejected with. */
export class WorkError extends Error {
  override readonly name = 'WorkError';
  readonly failure: Failure;

  constructor(failure: Failure, cause?: unknown) {
    super(`${failure.what}. ${failure.remedy}`, { cause });
    this.failure = failure;
  }
}

const STOP_CODES: ReadonlySet<string> = new Set(['MESHING_STOPPED', 'SOLVING_STOPPED']);

/** Any thrown value as a {@link Failure}; what is not one of our errors becomes a fault without its own words. */
export function toFailure(error: unknown): Failure {
  if (error instanceof WorkError) return error.failure;
  if (error instanceof CaseError || error instanceof MesherError || error instanceof SolverError) {
    const kind = STOP_CODES.has(error.code) ? 'stopped' : 'case';
    const { code, what, remedy } = error;
    return { kind, code, what, where: namedPlace(error.where), remedy };
  }
  if (error instanceof RangeError && /call stack/i.test(error.message)) {
    return {
      kind: 'limit',
      code: 'TOO_DEEP',
      what: 'The drawing or the case is nested or chained too deeply for the memory set aside for it',
      where: {},
      remedy: 'Leave out corners that do not matter, or split the drawing',
      trace: String(error.stack),
    };
  }
  return fault(error instanceof Error ? String(error.stack) : String(error));
}

/** The failure of a program fault; the trace goes to the log only. */
export function fault(trace: string): Failure {
  return {
    kind: 'fault',
    code: 'OWN_FAULT',
    what: 'Tarry failed through a fault of its own, not of the case',
    where: {},
    remedy: 'Keep the case and report it; a slightly different drawing or mesh size may get round it',
    trace,
  };
}

/** Mesher errors name loops; users look for them by key. */
function namedPlace(
  where: Where & { readonly loops?: readonly string[]; readonly tags?: readonly number[] },
): Where {
  const { loops, tags: _tags, ...place } = where;
  return loops !== undefined && loops.length > 0 && place.key === undefined
    ? { ...place, key: loops.join(', ') }
    : place;
}
