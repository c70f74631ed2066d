import { MesherError, type Point } from '../../mesher/index.ts';
import { SolverError } from '../../solver/index.ts';
import { CaseError } from './errors.ts';
import { showKey } from './key-path.ts';

const showNumber = (value: number): string => String(Number(value.toPrecision(7))).replace('-', '−');
const showPlace = ([x, y]: Point): string => `(${showNumber(x)}, ${showNumber(y)})`;

function showPlaces(at: readonly Point[] | undefined): string {
  if (at === undefined || at.length === 0) return '';
  const more = at.length > 6 ? ` and ${at.length - 6} more` : '';
  return `at ${at.slice(0, 6).map(showPlace).join(', ')}${more}`;
}

/** Places and names of an error in words, without the file; empty where it has none. */
function showWhere(error: CaseError | MesherError | SolverError): string {
  if (error instanceof CaseError) {
    const { file, line, key, at } = error.where;
    const source = [file, line === undefined ? undefined : `line ${line}`].filter(
      (part) => part !== undefined,
    );
    const parts = [source.join(' '), key === undefined ? '' : showKey(key), showPlaces(at)];
    return parts.filter((part) => part !== '').join(', ');
  }
  const names = error instanceof MesherError ? (error.where.loops ?? []) : [];
  const parts = [names.map((name) => JSON.stringify(name)).join(' and '), showPlaces(error.where.at)];
  return parts.filter((part) => part !== '').join(', ');
}

const sentence = (text: string): string => (/[.?!…]$/.test(text) ? text : `${text}.`);

/**
 * One message for a person: where, what is wrong, what to do.
 * `chamber.json line 31, layouts."coated post"."coat 1": partlyAbsorbing has no value. Give a reactivity such as …`
 *
 * @param error a CaseError, MesherError or SolverError; anything else is a fault of ours and is said to be so,
 *   without its own message.
 */
export function describeError(error: unknown): string {
  if (error instanceof CaseError || error instanceof MesherError || error instanceof SolverError) {
    const where = showWhere(error);
    return `${where === '' ? '' : `${where}: `}${sentence(error.what)} ${sentence(error.remedy)}`;
  }
  return 'A fault in Tarry itself, not in the case. Please report it with the case that led to it.';
}
