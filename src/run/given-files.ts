import { CaseError } from '../case/errors.ts';

/**
 * Reads files from those handed over with a case, and from nowhere else.
 *
 * @throws {CaseError} FILE_NOT_GIVEN, by the function returned
 */
export function givenFiles(files: Readonly<Record<string, string>>): (name: string) => string {
  const given = new Map(Object.entries(files));
  return (name) => {
    const text = given.get(name) ?? given.get(name.replace(/^\.\//, ''));
    if (text !== undefined) return text;
    throw new CaseError(
      'FILE_NOT_GIVEN',
      `The case names the file "${name}", which was not handed over with it`,
      { file: name },
      'Send the file along with the case, under the name that the case uses',
    );
  };
}
