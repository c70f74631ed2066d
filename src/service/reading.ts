import { CaseError } from '../case/errors.ts';
import { threadFile } from '../run/thread-file.ts';
import { WorkThread } from '../run/work-thread.ts';
import type { CaseView, DrawingView } from './contract.ts';

/** A case file and what it needs, as text from outside. */
export interface CaseText {
  readonly text: string;
  /** Name of the case file, for messages; absent where none was given. */
  readonly file?: string;
  /** Contents of the files that the case names, by that name. */
  readonly files: Readonly<Record<string, string>>;
}

/** What the reading thread is given: text from outside, which is parsed nowhere else. */
export type ReadingJob =
  | { readonly kind: 'case'; readonly given: CaseText }
  | { readonly kind: 'drawing'; readonly svg: string; readonly name: string };

export type ReadingResult =
  | { readonly kind: 'case'; readonly view: CaseView }
  | { readonly kind: 'drawing'; readonly view: DrawingView };

/** Most seconds that reading one text may take, and most texts that wait to be read. */
const MOST_SECONDS = 20;
const MOST_WAITING = 32;

/**
 * Reads cases and drawings in a thread of its own, one after the other, so that no text from outside can hold up the
 * service or take it down.
 */
export class Reading {
  readonly #thread = new WorkThread<ReadingJob, ReadingResult>(threadFile('service/read-thread.js'), {
    heapMb: 1024,
    grace: 0,
  });
  #last: Promise<unknown> = Promise.resolve();
  #waiting = 0;

  /** @throws {WorkError} by the promise, when the text is refused; {CaseError} TOO_MUCH_WAITING */
  async case(given: CaseText): Promise<CaseView> {
    const result = await this.#inTurn({ kind: 'case', given });
    if (result.kind !== 'case') throw new Error('The reading thread gave a drawing for a case.');
    return result.view;
  }

  /** @throws {WorkError} by the promise, when the text is refused; {CaseError} TOO_MUCH_WAITING */
  async drawing(svg: string, name: string): Promise<DrawingView> {
    const result = await this.#inTurn({ kind: 'drawing', svg, name });
    if (result.kind !== 'drawing') throw new Error('The reading thread gave a case for a drawing.');
    return result.view;
  }

  /** Loads what reading needs before there is something to read. */
  warm(): void {
    this.#thread.warm();
  }

  close(): Promise<void> {
    return this.#thread.close();
  }

  async #inTurn(job: ReadingJob): Promise<ReadingResult> {
    if (this.#waiting >= MOST_WAITING) {
      throw new CaseError(
        'TOO_MUCH_WAITING',
        'More cases are waiting to be read than the service takes on',
        {},
        'Try again in a moment',
      );
    }
    this.#waiting++;
    const turn = this.#last.then(() => this.#thread.run(job, { seconds: MOST_SECONDS }));
    this.#last = turn.catch(() => undefined);
    try {
      return await turn;
    } finally {
      this.#waiting--;
    }
  }
}
