import type { FastifyError, FastifySchemaValidationError } from 'fastify';
import type { Point } from '../../mesher/index.ts';
import { CaseError } from '../case/errors.ts';
import { type Failure, toFailure } from '../run/failure.ts';
import type { ErrorView } from './contract.ts';

/** What a failed request is answered with; `trace` goes to the log only. */
export interface AnsweredError {
  readonly status: number;
  readonly body: ErrorView;
  readonly trace?: string;
}

/** HTTP status of the codes that are the service's own; every other code follows its kind. */
const STATUS: Readonly<Record<string, number>> = {
  BODY_NOT_JSON: 400,
  BODY_DOES_NOT_FIT: 400,
  REQUEST_REFUSED: 400,
  FOREIGN_HOST: 403,
  FOREIGN_ORIGIN: 403,
  NO_SUCH_ADDRESS: 404,
  UNKNOWN_CASE: 404,
  UNKNOWN_JOB: 404,
  UNKNOWN_LAYOUT: 404,
  UNKNOWN_SAMPLE: 404,
  UNKNOWN_START: 404,
  NOT_SOLVED: 409,
  BODY_TOO_LARGE: 413,
  CASE_TOO_LARGE: 413,
  DRAWING_TOO_LARGE: 413,
  BODY_TYPE_UNKNOWN: 415,
  TOO_MANY_REQUESTS: 429,
  TOO_MUCH_WAITING: 503,
  PAGE_NOT_BUILT: 503,
};

const STATUS_OF_KIND: Readonly<Record<Failure['kind'], number>> = {
  case: 422,
  limit: 422,
  stopped: 503,
  fault: 500,
};

/** Status and body for anything thrown while a request was answered. */
export function errorView(error: unknown): AnsweredError {
  const failure = toFailure(ownWords(error));
  const status = STATUS[failure.code] ?? STATUS_OF_KIND[failure.kind];
  return { status, body: { error: failureView(failure) }, ...(failure.trace && { trace: failure.trace }) };
}

/** A failure as the page sees it: without kind and trace. */
export function failureView({ code, what, where, remedy }: Failure): ErrorView['error'] {
  const { at, key, file, line } = where;
  return {
    code,
    what,
    where: {
      ...(at !== undefined && { at: at.filter(isFinitePlace).map(([x, y]): [number, number] => [x, y]) }),
      ...(key !== undefined && { key }),
      ...(file !== undefined && { file }),
      ...(line !== undefined && { line }),
    },
    remedy,
  };
}

function isFinitePlace([x, y]: Point): boolean {
  return Number.isFinite(x) && Number.isFinite(y);
}

/** Fastify's errors in our words; everything else as it is. */
function ownWords(error: unknown): unknown {
  if (!(error instanceof Error) || error instanceof CaseError || !('statusCode' in error)) return error;
  const { code, statusCode, validation, validationContext } = error as FastifyError;
  if (validation !== undefined) return misfit(validation, validationContext ?? 'body', error);
  switch (code) {
    case 'FST_ERR_CTP_BODY_TOO_LARGE':
      return new CaseError(
        'BODY_TOO_LARGE',
        'The request is larger than this address takes',
        {},
        'Keep a case file under 10 MB and a drawing under 5 MB',
        error,
      );
    case 'FST_ERR_CTP_INVALID_MEDIA_TYPE':
      return new CaseError(
        'BODY_TYPE_UNKNOWN',
        'The request carries something else than JSON',
        { key: 'content-type' },
        'Send JSON with content-type application/json',
        error,
      );
    case 'FST_ERR_CTP_EMPTY_JSON_BODY':
    case 'FST_ERR_CTP_INVALID_JSON_BODY':
      return new CaseError(
        'BODY_NOT_JSON',
        'The body of the request is not JSON that can be read',
        {},
        'Send one complete JSON object, without "__proto__" or "constructor" keys',
        error,
      );
  }
  if (statusCode !== undefined && statusCode >= 400 && statusCode < 500) return refused(statusCode, error);
  return error;
}

function refused(statusCode: number, cause: Error): CaseError {
  if (statusCode === 404) return noSuchAddress(cause);
  if (statusCode === 413) {
    return new CaseError('BODY_TOO_LARGE', 'The request is too large', {}, 'Send less at once', cause);
  }
  return new CaseError(
    'REQUEST_REFUSED',
    'The request is not one that can be read',
    {},
    'Check its address, length and headers',
    cause,
  );
}

/** The refusal of an address that leads nowhere. */
export function noSuchAddress(cause?: unknown): CaseError {
  return new CaseError(
    'NO_SUCH_ADDRESS',
    'There is nothing at this address',
    {},
    'Check the address and the method',
    cause,
  );
}

/** A schema's complaint as a key path and a plain sentence; of several branches the deepest place is named. */
function misfit(
  complaints: readonly FastifySchemaValidationError[],
  context: string,
  cause: Error,
): CaseError {
  const telling = complaints.filter(({ keyword }) => keyword !== 'anyOf');
  const first = [...telling].sort((a, b) => depth(b) - depth(a))[0] ?? complaints[0];
  const path = (first?.instancePath ?? '').split('/').slice(1).map(unescapePointer);
  return new CaseError(
    'BODY_DOES_NOT_FIT',
    first === undefined ? 'The request does not have the form asked for' : complaint(first),
    { key: [context, ...path].join('.') },
    'Send the keys that this address takes, with no others',
    cause,
  );
}

function depth({ instancePath }: FastifySchemaValidationError): number {
  return instancePath.split('/').length;
}

function unescapePointer(step: string): string {
  return step.replaceAll('~1', '/').replaceAll('~0', '~');
}

function complaint({ keyword, params }: FastifySchemaValidationError): string {
  const { missingProperty, additionalProperty, type, limit } = params;
  const quoted = (key: unknown): string => JSON.stringify(String(key).slice(0, 80));
  switch (keyword) {
    case 'required':
      return `The key ${quoted(missingProperty)} is missing`;
    case 'additionalProperties':
      return `The key ${quoted(additionalProperty)} is not known here`;
    case 'type':
      return `This is not of type ${String(type)}`;
    case 'maxLength':
    case 'maxItems':
    case 'maxProperties':
      return `This is longer than ${String(limit)}`;
    default:
      return 'This does not have the form asked for';
  }
}
