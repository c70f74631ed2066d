import { describe, expect, it } from 'vitest';
import { MesherError } from '../../mesher/index.ts';
import { SolverError } from '../../solver/index.ts';
import { describeError } from '../../src/case/describe-error.ts';
import { CaseError } from '../../src/case/errors.ts';

describe('one message for every error', () => {
  it('names file, line and key, then what and what to do', () => {
    const where = { file: 'chamber.json', line: 31, key: 'layouts.coated post.coat 1' };
    const error = new CaseError('CASE_VALUE_WRONG', 'partlyAbsorbing has no value', where, 'Give one');
    expect(describeError(error)).toBe(
      'chamber.json line 31, layouts."coated post"."coat 1": partlyAbsorbing has no value. Give one.',
    );
  });

  it('names places, with more than six of them counted', () => {
    const at = Array.from({ length: 8 }, (_, i) => [i, -0.1] as const);
    const error = new MesherError(
      'WALLS_CROSS',
      'walls cross',
      { at, loops: ['outline', 'post 1'] },
      'Move one.',
    );
    expect(describeError(error)).toBe(
      '"outline" and "post 1", at (0, −0.1), (1, −0.1), (2, −0.1), (3, −0.1), (4, −0.1), (5, −0.1) and 2 more: walls cross. Move one.',
    );
    expect(describeError(new SolverError('NO_WAY_OUT', 'no way out', {}, 'Make a wall absorbing'))).toBe(
      'no way out. Make a wall absorbing.',
    );
  });

  it('takes anything else for a fault of ours, and keeps its words to itself', () => {
    const text = describeError(new TypeError("Cannot read properties of undefined (reading 'x')"));
    expect(text).toContain('A fault in Tarry itself');
    expect(text).not.toContain('undefined');
    expect(describeError(undefined)).toBe(text);
  });
});
