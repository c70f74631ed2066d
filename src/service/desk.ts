import { CaseError } from '../case/errors.ts';
import type { LayoutPicture } from '../run/layout-view.ts';
import { type SolvingThread, solvingThread } from '../run/run-in-thread.ts';
import type { CaseUpload, CaseView, JobView, LayoutView } from './contract.ts';
import { drawingCase } from './drawing-case.ts';
import { JobBoard, type Watch } from './job-board.ts';
import { type CaseText, Reading } from './reading.ts';
import type { Sample } from './samples.ts';
import { Shelf } from './shelf.ts';

/** A case as the service keeps it: as text, with what the page says about it. */
interface KeptCase extends CaseText {
  readonly view: CaseView;
}

/** A solved layout as the service keeps it. */
export interface KeptAnswer {
  readonly picture: LayoutPicture;
  readonly field: Buffer;
  /** SHA-256 of the field. */
  readonly fieldHash: string;
}

/** Largest texts taken, in bytes (CASE.md, details). */
export const LARGEST_CASE = 10_000_000;
export const LARGEST_DRAWING = 5_000_000;

const MOST_CASES = { count: 200, bytes: 400_000_000 };
const MOST_ANSWERS = { count: 500, bytes: 800_000_000 };
/** Most seconds of one solve, above the limit that the case itself sets. */
const MOST_SECONDS = 1800;

/** Everything the service knows while it runs: cases, answers, work. Nothing in it knows HTTP. */
export class Desk {
  readonly reading = new Reading();
  readonly jobs: JobBoard;
  readonly #cases = new Shelf<KeptCase>(MOST_CASES);
  readonly #answers = new Shelf<KeptAnswer>(MOST_ANSWERS);
  readonly #threads: readonly SolvingThread[];

  constructor(options: { threads: number; onFault: (trace: string) => void }) {
    this.#threads = Array.from({ length: options.threads }, () => solvingThread());
    this.jobs = new JobBoard({
      threads: options.threads,
      solve: (slot, caseId, layout, watch) => this.#solve(slot, caseId, layout, watch),
      isAnswered: (caseId, layout) => this.#answers.get(answerKey(caseId, layout)) !== undefined,
      onFault: options.onFault,
    });
  }

  /** Starts the threads that the first case will need. */
  warm(): void {
    this.reading.warm();
    this.#threads[0]?.warm();
  }

  /** @throws {CaseError} CASE_TOO_LARGE, DRAWING_TOO_LARGE; {WorkError} by the promise, when the case is refused */
  async upload(upload: CaseUpload): Promise<CaseView> {
    if ('svg' in upload) {
      checkSize(upload.svg, LARGEST_DRAWING, 'drawing');
      const { text, file, files } = drawingCase(upload);
      return this.#keep({ text, file, files });
    }
    checkSize(upload.case, LARGEST_CASE, 'case');
    for (const drawing of Object.values(upload.files ?? {})) checkSize(drawing, LARGEST_DRAWING, 'drawing');
    return this.#keep({
      text: upload.case,
      ...(upload.name !== undefined && { file: upload.name }),
      files: upload.files ?? {},
    });
  }

  openSample({ text, file, files }: Sample): Promise<CaseView> {
    return this.#keep({ text, file, files });
  }

  /** @throws {CaseError} UNKNOWN_CASE */
  caseView(id: string): CaseView {
    return this.#case(id).view;
  }

  /** @throws {CaseError} UNKNOWN_CASE, UNKNOWN_LAYOUT, TOO_MUCH_WAITING */
  ask(caseId: string, layout: string): JobView {
    this.#checkLayout(caseId, layout);
    return this.jobs.ask(caseId, layout);
  }

  /** @throws {CaseError} UNKNOWN_CASE, UNKNOWN_LAYOUT, NOT_SOLVED */
  answer(caseId: string, layout: string): KeptAnswer {
    this.#checkLayout(caseId, layout);
    const answer = this.#answers.get(answerKey(caseId, layout));
    if (answer !== undefined) return answer;
    throw new CaseError(
      'NOT_SOLVED',
      `The layout "${layout}" has no answer here yet`,
      { key: `layouts.${layout}` },
      'Ask for it by POST to /api/jobs and wait until that job is done',
    );
  }

  /**
   * @param start name of the start that the walls' flux is for; the first without it
   * @throws {CaseError} UNKNOWN_CASE, UNKNOWN_LAYOUT, NOT_SOLVED, UNKNOWN_START
   */
  layoutView(caseId: string, layout: string, start?: string): LayoutView {
    const { flux, walls, answers, ...rest } = this.answer(caseId, layout).picture;
    const index = start === undefined ? 0 : answers.findIndex((answer) => answer.start === start);
    const shown = answers[index];
    if (index < 0 || (start !== undefined && shown === undefined)) throw unknownStart(start ?? '');
    return {
      caseId,
      ...rest,
      answers,
      ...(shown !== undefined && { start: shown.start }),
      walls: walls.map((wall, w) => {
        const density = flux[index]?.[w];
        return density === undefined ? wall : { ...wall, flux: density };
      }),
    };
  }

  /** Stops all work and ends every thread. */
  async close(): Promise<void> {
    this.jobs.close();
    await Promise.all([this.reading.close(), ...this.#threads.map((thread) => thread.close())]);
  }

  async #keep(given: CaseText): Promise<CaseView> {
    const view = await this.reading.case(given);
    const bytes = [given.text, ...Object.values(given.files)].reduce((sum, one) => sum + one.length, 0);
    this.#cases.put(view.id, { ...given, view }, bytes);
    return view;
  }

  async #solve(slot: number, caseId: string, layout: string, watch: Watch): Promise<void> {
    const { view: _view, ...given } = this.#case(caseId);
    const thread = this.#threads[slot];
    if (thread === undefined) throw new Error(`There is no thread ${slot}.`);
    const result = await thread.run(
      {
        ...given,
        layout,
        at: new Date().toISOString(),
        command: 'tarry serve',
        wanted: 'picture',
      },
      { ...watch, seconds: MOST_SECONDS },
    );
    if (result.kind !== 'picture') throw new Error('The solving thread gave an answer for a picture.');
    const { view: picture, field, fieldHash } = result;
    this.#answers.put(
      answerKey(caseId, layout),
      { picture, field: Buffer.from(field), fieldHash },
      field.byteLength * 2,
    );
  }

  #case(id: string): KeptCase {
    const kept = this.#cases.get(id);
    if (kept !== undefined) return kept;
    throw new CaseError(
      'UNKNOWN_CASE',
      'The service does not have this case, or has it no longer',
      {},
      'Open the case or the drawing again',
    );
  }

  #checkLayout(caseId: string, layout: string): void {
    const { layouts } = this.#case(caseId).view;
    if (layouts.includes(layout)) return;
    throw new CaseError(
      'UNKNOWN_LAYOUT',
      `No layout is called "${layout.slice(0, 80)}"`,
      { key: 'layouts' },
      `Choose one of ${layouts.map((one) => `"${one}"`).join(', ')}`,
    );
  }
}

function answerKey(caseId: string, layout: string): string {
  return `${caseId}/${layout}`;
}

/** @throws {CaseError} CASE_TOO_LARGE, DRAWING_TOO_LARGE */
export function checkSize(text: string, most: number, what: 'case' | 'drawing'): void {
  const bytes = Buffer.byteLength(text);
  if (bytes <= most) return;
  throw new CaseError(
    what === 'case' ? 'CASE_TOO_LARGE' : 'DRAWING_TOO_LARGE',
    `The ${what} has ${(bytes / 1e6).toFixed(1)} MB`,
    {},
    `Keep a ${what} under ${most / 1e6} MB`,
  );
}

function unknownStart(start: string): CaseError {
  return new CaseError(
    'UNKNOWN_START',
    `No start is called "${start.slice(0, 80)}"`,
    { key: 'starts' },
    'Choose one that the case names',
  );
}
