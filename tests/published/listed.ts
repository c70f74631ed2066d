import { readFileSync } from 'node:fs';
import { join } from 'node:path';

interface ListedCheck {
  readonly id: string;
  readonly values: Readonly<Record<string, string>>;
  readonly published?: Readonly<Record<string, string>>;
}

/** The check values as handed over, each recomputed by two methods none of which is a finite element method. */
export const listedChecks: readonly ListedCheck[] = JSON.parse(
  readFileSync(join(import.meta.dirname, '../data/checks.json'), 'utf8'),
);

/** A listed value by the check's id and the value's label. */
export function listed(id: string, label: string): number {
  return numberIn(id, label, find(id).values[label]);
}

/** A figure as a handbook prints it, by the check's id and the label. */
export function printed(id: string, label: string): number {
  return numberIn(id, label, find(id).published?.[label]);
}

function find(id: string): ListedCheck {
  const check = listedChecks.find((one) => one.id === id);
  if (!check) throw new Error(`checks.json has no check ${id}`);
  return check;
}

function numberIn(id: string, label: string, text: string | undefined): number {
  const value = Number.parseFloat(text ?? '');
  if (!Number.isFinite(value)) throw new Error(`check ${id} lists no number as "${label}"`);
  return value;
}
