import { readdirSync, readFileSync } from 'node:fs';
import Value from 'typebox/value';
import { expect, it } from 'vitest';
import { readCase } from '../../src/case/read-case.ts';
import { caseSchema } from '../../src/case/schema.ts';

it('every sample case loads and fits the published schema', () => {
  const folder = new URL('../../meshes/', import.meta.url);
  const names = readdirSync(folder).filter((name) => name.endsWith('.case.json'));
  for (const file of names) {
    const text = readFileSync(new URL(file, folder), 'utf8');
    expect(Value.Check(caseSchema, JSON.parse(text)), file).toBe(true);
    const read = readCase(text, { file, readFile: (name) => readFileSync(new URL(name, folder)) });
    expect(read.layouts.length, file).toBeGreaterThan(0);
  }
  expect(names.length).toBeGreaterThan(3);
});
