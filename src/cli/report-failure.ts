import { describeError } from '../case/describe-error.ts';
import { CaseError } from '../case/errors.ts';
import { type Failure, toFailure, WorkError } from '../run/failure.ts';
import { status } from './status.ts';

/**
 * Tells a failure on standard error: one message for a person or, as the last line, one JSON object.
 *
 * @returns the exit status that goes with it
 */
export function report(error: unknown, json: boolean): number {
  const failure = toFailure(error);
  if (json) {
    const { code, what, where, remedy } = failure;
    console.error(JSON.stringify({ error: { code, what, where, remedy } }));
  } else if (failure.kind === 'stopped') console.error('Stopped. Nothing was written.');
  else console.error(describeFailure(error, failure));
  return statusOf(failure);
}

function describeFailure(error: unknown, failure: Failure): string {
  if (!(error instanceof WorkError) && failure.kind === 'case') return describeError(error);
  return describeError(new CaseError(failure.code, failure.what, failure.where, failure.remedy));
}

function statusOf(failure: Failure): number {
  switch (failure.kind) {
    case 'case':
      return status.caseAtFault;
    case 'limit':
      return status.limitReached;
    case 'stopped':
      return status.stopped;
    case 'fault':
      return status.ourFault;
  }
}
