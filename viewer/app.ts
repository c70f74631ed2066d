import type { CaseUpload, CaseView, DrawingView, JobView, SampleView } from '../src/service/contract.ts';
import { api, ConnectionLost, followJob, type Refusal, Refused } from './api.ts';
import { Frame, type TitleBlock } from './page/frame.ts';
import { readPlace, writePlace } from './page/place.ts';
import { readField } from './plan/field.ts';
import { BenchSheet, type Solved } from './sheets/bench-sheet.ts';
import { emptySheet } from './sheets/empty-sheet.ts';
import { type GivenFile, takeDrops } from './sheets/file-place.ts';
import { refusedSheet, sentenceOf } from './sheets/refused-sheet.ts';
import { type TakenForm, takenSheet } from './sheets/taken-sheet.ts';
import { readAnswers } from './words/answers.ts';
import { timeUnitFor } from './words/display-unit.ts';
import { Letters } from './words/letters.ts';
import { numberText, withUnit } from './words/number-text.ts';

interface Open {
  readonly case: CaseView;
  readonly bench: BenchSheet;
  readonly solved: Map<string, Solved>;
  layout: string;
  start: string;
  job?: { readonly id: string; readonly end: () => void };
}

const NO_START = '';

/** The page as a whole: which sheet is shown, what is asked of the service, what the title block says. */
export class App {
  readonly #frame: Frame;
  #samples: readonly SampleView[] | undefined;
  #open: Open | undefined;
  #lastChange = 'nothing yet';
  /** Counts what was asked for, so that an answer that comes too late is dropped. */
  #turn = 0;

  constructor(body: HTMLElement) {
    this.#frame = new Frame(body);
    takeDrops((files) => this.#takeFiles(files));
    addEventListener('keydown', (event) => {
      if (event.key === 'Escape' && this.#open?.job !== undefined) this.#stop();
    });
  }

  /** Shows what the address names, else the empty sheet. */
  async begin(): Promise<void> {
    const place = readPlace();
    if (place === undefined) return this.#showEmpty();
    const turn = this.#next();
    try {
      const theCase = await api.caseAgain(place.case);
      if (turn === this.#turn) this.#openCase(theCase, 'opened again', place.layout, place.start);
    } catch (error) {
      if (error instanceof Refused) this.#showEmpty();
      else this.#failed(error, 'The case');
    }
  }

  #next(): number {
    this.#open?.job?.end();
    if (this.#open !== undefined) delete this.#open.job;
    return ++this.#turn;
  }

  #fill(solver: string, more: Partial<TitleBlock> = {}): void {
    this.#frame.fill({ case: 'none yet', solver, lastChange: this.#lastChange, ...more });
  }

  #showEmpty(): void {
    this.#next();
    this.#closeCase();
    writePlace(undefined);
    const draw = () => {
      this.#frame.show(
        'empty',
        ...emptySheet({
          samples: this.#samples,
          openSample: (name) => this.#openSample(name),
          take: (files) => this.#takeFiles(files),
        }),
      );
    };
    draw();
    this.#fill('Ready.');
    if (this.#samples !== undefined) return;
    const turn = this.#turn;
    api.samples().then(
      (samples) => {
        this.#samples = samples;
        if (turn === this.#turn) draw();
      },
      (error: unknown) => {
        if (turn === this.#turn) this.#failed(error, 'The list of samples');
      },
    );
  }

  #closeCase(): void {
    this.#open?.bench.dispose();
    this.#open = undefined;
  }

  #openSample(name: string): void {
    this.#frame.solver('Opening the sample …');
    this.#ask(api.openSample(name), 'The sample', (theCase) => this.#openCase(theCase, 'opened a sample'));
  }

  /** Waits for the service; hands the answer on if nothing else was asked meanwhile. */
  #ask<T>(asked: Promise<T>, what: string, then: (answer: T) => void, back?: () => void): void {
    const turn = this.#next();
    asked.then(
      (answer) => {
        if (turn === this.#turn) then(answer);
      },
      (error: unknown) => {
        if (turn === this.#turn) this.#failed(error, what, back);
      },
    );
  }

  #takeFiles(files: readonly File[]): void {
    const turn = this.#next();
    Promise.all(
      files.map(async (file): Promise<GivenFile> => ({ name: file.name, text: await file.text() })),
    ).then(
      (given) => {
        if (turn === this.#turn) this.#taken(given);
      },
      () => {
        if (turn === this.#turn) this.#frame.solver('The file could not be read. Choose it again.');
      },
    );
  }

  #taken(given: readonly GivenFile[]): void {
    const theCase = given.find(
      (file) => !/\.svg$/i.test(file.name) && !file.text.trimStart().startsWith('<'),
    );
    const drawing = given.find((file) => file !== theCase);
    if (theCase !== undefined) {
      const others = given.filter((file) => file !== theCase);
      const files = Object.fromEntries(others.map((file) => [file.name, file.text]));
      const upload: CaseUpload = { case: theCase.text, ...(others.length > 0 ? { files } : {}) };
      this.#frame.solver(`Reading ${theCase.name} …`);
      this.#ask(api.openCase(upload), theCase.name, (view) => this.#openCase(view, `opened ${theCase.name}`));
    } else if (drawing !== undefined) {
      this.#frame.solver(`Reading ${drawing.name} …`);
      this.#ask(api.readDrawing(drawing.text, drawing.name), drawing.name, (view) => {
        const form = { drawingUnit: '', diffusion: '', length: '', time: '', catching: undefined };
        this.#showTaken(drawing, view, form);
      });
    }
  }

  #showTaken(file: GivenFile, drawing: DrawingView, form: TakenForm): void {
    this.#next();
    this.#closeCase();
    writePlace(undefined);
    const back = () => this.#showTaken(file, drawing, form);
    this.#frame.show(
      'taken',
      ...takenSheet({
        file,
        drawing,
        form,
        take: (files) => this.#takeFiles(files),
        open: (upload) => {
          this.#frame.solver('Reading the drawing as a case …');
          this.#ask(
            api.openCase(upload),
            file.name,
            (view) => this.#openCase(view, `opened ${file.name}`),
            back,
          );
        },
      }),
    );
    this.#lastChange = `read ${file.name}`;
    this.#fill('Waiting for you: what catches.', {
      case: 'not opened yet',
      file: file.name,
      another: () => this.#showEmpty(),
    });
    this.#frame.say(`${drawing.shapes.length} shapes found in ${file.name}`);
  }

  #openCase(theCase: CaseView, change: string, layout?: string, start?: string): void {
    this.#next();
    this.#closeCase();
    const bench = new BenchSheet(theCase, new Letters(), {
      chooseLayout: (name) => this.#chooseLayout(name),
      chooseStart: (name) => this.#chooseStart(name),
      stop: () => this.#stop(),
      solve: () => this.#solve(),
    });
    const known = (name: string | undefined) => name !== undefined && theCase.layouts.includes(name);
    this.#open = {
      case: theCase,
      bench,
      solved: new Map(),
      layout: known(layout) ? (layout ?? theCase.reference) : theCase.reference,
      start: start ?? theCase.asked[0]?.start ?? theCase.starts[0]?.name ?? NO_START,
    };
    this.#lastChange = change;
    document.title = `${theCase.title}, Tarry`;
    this.#solve();
  }

  #chooseLayout(layout: string): void {
    if (this.#open === undefined) return;
    this.#open.layout = layout;
    this.#lastChange = `chose ${layout}`;
    this.#solve();
  }

  #chooseStart(start: string): void {
    const open = this.#open;
    if (open === undefined) return;
    open.start = start;
    this.#lastChange = `chose the release ${start}`;
    // The share caught along the wall belongs to one start: the picture is asked for again.
    const solved = open.solved.get(open.layout);
    if (solved === undefined) return this.#solve();
    this.#ask(api.layout(open.case.id, open.layout, start), open.case.title, (layout) => {
      this.#answered({ ...solved, layout, answers: layout.answers.map(readAnswers) });
    });
  }

  #showBench(state: 'solving' | 'answered', open: Open): void {
    const { sheet } = this.#frame;
    open.bench.sentence(open.layout);
    if (open.bench.parts.every((part) => part.parentElement === sheet)) {
      document.body.dataset['state'] = state;
    } else {
      this.#frame.show(state, ...open.bench.parts);
      sheet.className = 'sheet sheet-bench';
    }
    writePlace({ case: open.case.id, layout: open.layout, start: open.start });
  }

  #fillBench(open: Open, solver: string, stop?: () => void): void {
    this.#fill(solver, {
      case: open.case.title,
      drawing: open.case.drawing,
      sheet: 'Bench',
      another: () => this.#showEmpty(),
      ...(stop === undefined ? {} : { stop }),
    });
  }

  /** Solves the layout chosen, or shows it if it is solved. */
  #solve(): void {
    const open = this.#open;
    if (open === undefined) return;
    const solved = open.solved.get(open.layout);
    const turn = this.#next();
    if (solved !== undefined && solved.layout.start === open.start) return this.#answered(solved);
    this.#showBench('solving', open);
    open.bench.solving(undefined);
    this.#fillBench(open, `Solving ${open.layout} …`, () => this.#stop());
    api.solve(open.case.id, open.layout).then(
      (job) => {
        if (turn !== this.#turn) return;
        const failed = (error: unknown) => {
          if (turn === this.#turn) this.#failed(error, open.case.title);
        };
        const end = followJob(job.id, (now) => turn === this.#turn && this.#progress(open, now), failed);
        if (turn === this.#turn) open.job = { id: job.id, end };
      },
      (error: unknown) => {
        if (turn === this.#turn) this.#failed(error, open.case.title);
      },
    );
  }

  #progress(open: Open, job: JobView): void {
    switch (job.state) {
      case 'waiting':
      case 'running':
        open.bench.solving(job);
        this.#frame.solver(`${sentenceOf(`${open.layout}: ${job.doing}`)}`);
        return;
      case 'done':
        delete open.job;
        this.#load(open);
        return;
      case 'stopped':
        delete open.job;
        this.#stopped(open);
        return;
      case 'failed':
        delete open.job;
        this.#refuse(
          job.error ?? { code: 'FAILED', what: job.doing, where: {}, remedy: 'Solve it again.' },
          open.case.title,
        );
    }
  }

  #load(open: Open): void {
    const { layout, start } = open;
    const { id, title } = open.case;
    const both = Promise.all([api.layout(id, layout, start), api.field(id, layout)]);
    this.#ask(both, title, ([view, bytes]) => {
      const solved = { layout: view, field: readField(bytes), answers: view.answers.map(readAnswers) };
      this.#answered(solved);
    });
  }

  #answered(solved: Solved): void {
    const open = this.#open;
    if (open === undefined) return;
    open.solved.set(open.layout, solved);
    this.#showBench('answered', open);
    open.bench.show(solved, open.start);
    const all = open.case.layouts.length;
    const words = all === 1 ? 'Solved.' : `${open.solved.size} of ${all} layouts solved.`;
    this.#fillBench(open, `${words} Nothing running.`);
    const mean = solved.answers.find((one) => one.start === open.start)?.mean.value;
    const time = timeUnitFor(solved.layout.longest.value, open.case.units.time);
    if (mean === undefined) return;
    const value = withUnit(numberText(mean * time.factor), time.name);
    this.#frame.say(`${open.layout}: mean time until caught ${value}, estimated, not proven.`);
  }

  #stop(): void {
    const open = this.#open;
    const job = open?.job;
    if (open === undefined || job === undefined) return;
    this.#next();
    api.stop(job.id).catch((error: unknown) => this.#failed(error, open.case.title));
    this.#stopped(open);
  }

  #stopped(open: Open): void {
    this.#lastChange = 'stopped a solve';
    open.bench.stopped(`${open.layout} is not solved: it was stopped.`);
    this.#fillBench(open, 'Stopped. Nothing running.');
    this.#frame.say('Stopped.');
  }

  #failed(error: unknown, what: string, back?: () => void): void {
    if (error instanceof Refused) return this.#refuse(error.refusal, what, back);
    if (error instanceof ConnectionLost) return this.#lost();
    this.#refuse(
      {
        code: 'PAGE_FAULT',
        what: 'The page could not read what the service sent',
        where: {},
        remedy:
          'Load the page again; if it happens twice, the page and the service are of different versions',
      },
      what,
      back,
    );
  }

  #lost(): void {
    document.body.classList.add('lost');
    this.#frame.solver('Connection lost: the service does not answer. What is shown is kept.');
    this.#frame.say('Connection lost.');
    const turn = this.#turn;
    const again = () => {
      if (turn !== this.#turn) return;
      api.samples().then(
        (samples) => {
          document.body.classList.remove('lost');
          this.#samples = samples;
          if (turn !== this.#turn) return;
          if (this.#open === undefined) this.#showEmpty();
          else this.#solve();
        },
        () => setTimeout(again, 2000),
      );
    };
    setTimeout(again, 2000);
  }

  #refuse(refusal: Refusal, what: string, back?: () => void): void {
    this.#next();
    const open = this.#open;
    const ways = back ?? (open === undefined ? () => this.#showEmpty() : undefined);
    const other = open?.case.layouts.find((name) => open.solved.has(name) && name !== open.layout);
    const step =
      ways !== undefined
        ? { words: back === undefined ? 'Back' : 'Back to the form', act: ways }
        : other === undefined
          ? { words: 'Back', act: () => this.#showEmpty() }
          : { words: `Back to ${other}`, act: () => this.#chooseLayout(other) };
    this.#frame.show(
      'refused',
      ...refusedSheet({ refusal, what, back: step, take: (files) => this.#takeFiles(files) }),
    );
    this.#fill('Not solved.', {
      case: open?.case.title ?? 'not opened',
      ...(open === undefined ? {} : { drawing: open.case.drawing }),
      another: () => this.#showEmpty(),
    });
  }
}
