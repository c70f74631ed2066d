import type { CaseView, JobView } from '../src/service/contract.ts';
import { api, followJob, type Refusal } from './api.ts';
import type { Frame, TitleBlock } from './page/frame.ts';
import { writePlace } from './page/place.ts';
import { readField } from './plan/field.ts';
import { askedText, keyFigure } from './readings/readings.ts';
import { BenchSheet, type Solved } from './sheets/bench-sheet.ts';
import { sentenceOf } from './sheets/refused-sheet.ts';
import { readAnswers } from './words/answers.ts';
import { timeUnitFor } from './words/display-unit.ts';
import { Letters } from './words/letters.ts';
import { figureWords } from './words/verdict.ts';

/** What an open case needs of the page around it. */
export interface Host {
  readonly frame: Frame;
  /** Begins something new: what was asked for before is dropped when it comes. Gives the number of this turn. */
  readonly next: () => number;
  readonly isCurrent: (turn: number) => boolean;
  readonly failed: (error: unknown, what: string) => void;
  readonly refuse: (refusal: Refusal, what: string) => void;
  readonly fill: (solver: string, more: Partial<TitleBlock>) => void;
  readonly another: () => void;
  readonly changed: (words: string) => void;
}

/** One open case: which layout and start are shown, what is solved, and the solve that runs. */
export class OpenCase {
  readonly case: CaseView;
  readonly #host: Host;
  readonly #bench: BenchSheet;
  readonly #solved = new Map<string, Solved>();
  #layout: string;
  #start: string;
  #job: { readonly id: string; readonly end: () => void } | undefined;

  constructor(theCase: CaseView, host: Host, layout?: string, start?: string) {
    this.case = theCase;
    this.#host = host;
    this.#layout = layout !== undefined && theCase.layouts.includes(layout) ? layout : theCase.reference;
    const starts = theCase.starts.map((one) => one.name);
    const known = start !== undefined && starts.includes(start);
    this.#start = known ? start : (theCase.asked[0]?.start ?? starts[0] ?? '');
    this.#bench = new BenchSheet(theCase, new Letters(), {
      chooseLayout: (name) => this.chooseLayout(name),
      chooseStart: (name) => this.#chooseStart(name),
      stop: () => this.stop(),
      solve: () => this.solve(),
    });
  }

  /** A solved layout other than the one chosen. */
  get other(): string | undefined {
    return this.case.layouts.find((name) => this.#solved.has(name) && name !== this.#layout);
  }

  /** Lets go of the running solve without stopping it on the service. */
  letGo(): void {
    this.#job?.end();
    this.#job = undefined;
  }

  /** The service does not answer at the moment. */
  lost(): void {
    this.#bench.lost();
  }

  dispose(): void {
    this.letGo();
    this.#bench.dispose();
  }

  chooseLayout(layout: string): void {
    this.#layout = layout;
    this.#host.changed(`chose ${layout}`);
    this.solve();
  }

  #chooseStart(start: string): void {
    this.#start = start;
    this.#host.changed(`chose the release ${start}`);
    // The share caught along the wall belongs to one start: the picture is asked for again.
    const solved = this.#solved.get(this.#layout);
    if (solved === undefined) {
      this.solve();
      return;
    }
    const turn = this.#host.next();
    api.layout(this.case.id, this.#layout, start).then(
      (layout) => {
        if (!this.#host.isCurrent(turn)) return;
        this.#answered({ ...solved, layout, answers: layout.answers.map(readAnswers) });
      },
      (error: unknown) => this.#fail(turn, error),
    );
  }

  /** Solves the layout chosen, or shows it if it is solved. */
  solve(): void {
    const { next, isCurrent } = this.#host;
    const solved = this.#solved.get(this.#layout);
    const turn = next();
    if (solved !== undefined && solved.layout.start === this.#start) {
      this.#answered(solved);
      return;
    }
    this.#showBench('solving');
    this.#bench.solving(undefined);
    this.#fill(`Solving ${this.#layout} …`);
    api.solve(this.case.id, this.#layout).then(
      (job) => {
        if (!isCurrent(turn)) return;
        const end = followJob(
          job.id,
          (now) => isCurrent(turn) && this.#progress(turn, now),
          (error) => this.#fail(turn, error),
        );
        this.#job = { id: job.id, end };
      },
      (error: unknown) => this.#fail(turn, error),
    );
  }

  /** Stops the running solve, if one runs. */
  stop(): void {
    const job = this.#job;
    if (job === undefined) return;
    const turn = this.#host.next();
    api.stop(job.id).catch((error: unknown) => this.#fail(turn, error));
    this.#stopped();
  }

  #fail(turn: number, error: unknown): void {
    if (this.#host.isCurrent(turn)) this.#host.failed(error, this.case.title);
  }

  #progress(turn: number, job: JobView): void {
    switch (job.state) {
      case 'waiting':
      case 'running':
        this.#bench.solving(job);
        this.#host.frame.solver(sentenceOf(`${this.#layout}: ${job.doing}`));
        return;
      case 'done':
        this.#job = undefined;
        this.#load(turn);
        return;
      case 'stopped':
        this.#job = undefined;
        this.#stopped();
        return;
      case 'failed':
        this.#job = undefined;
        this.#host.refuse(
          job.error ?? { code: 'FAILED', what: job.doing, where: {}, remedy: 'Solve it again.' },
          `${this.case.title}, layout ${this.#layout},`,
        );
    }
  }

  #load(turn: number): void {
    const { id } = this.case;
    Promise.all([api.layout(id, this.#layout, this.#start), api.field(id, this.#layout)])
      .then(([layout, bytes]) => {
        if (!this.#host.isCurrent(turn)) return;
        this.#answered({ layout, field: readField(bytes), answers: layout.answers.map(readAnswers) });
      })
      .catch((error: unknown) => this.#fail(turn, error));
  }

  #answered(solved: Solved): void {
    this.#solved.set(this.#layout, solved);
    this.#showBench('solving');
    this.#bench.show(solved, this.#start);
    document.body.dataset['state'] = 'answered';
    const all = this.case.layouts.length;
    const words = all === 1 ? 'Solved.' : `${this.#solved.size} of ${all} layouts solved.`;
    this.#fill(`${words} Nothing running.`);
    const shown = solved.answers.find((one) => one.start === this.#start);
    if (shown === undefined) return;
    const time = timeUnitFor(solved.layout.longest.value, this.case.units.time);
    const key = keyFigure(shown);
    const trust = key.bracket?.proven === true ? '' : ', estimated, not proven';
    this.#host.frame.say(`${this.#layout}: ${figureWords(key.figure)} ${askedText(key, time)}${trust}.`);
  }

  #stopped(): void {
    this.#host.changed('stopped a solve');
    this.#bench.stopped(`${this.#layout} is not solved: it was stopped.`);
    this.#fill('Stopped. Nothing running.');
    this.#host.frame.say('Stopped.');
  }

  #showBench(state: 'solving'): void {
    const { sheet } = this.#host.frame;
    this.#bench.sentence(this.#layout);
    if (this.#bench.parts.every((part) => part.parentElement === sheet)) {
      document.body.dataset['state'] = state;
    } else {
      this.#host.frame.show(state, ...this.#bench.parts);
      sheet.className = 'sheet sheet-bench';
    }
    writePlace({ case: this.case.id, layout: this.#layout, start: this.#start });
  }

  #fill(solver: string): void {
    this.#host.fill(solver, {
      case: this.case.title,
      drawing: this.case.drawing,
      sheet: 'Bench',
      another: this.#host.another,
    });
  }
}
