import type { CaseUpload, CaseView, DrawingView, SampleView } from '../src/service/contract.ts';
import { api, ConnectionLost, type Refusal, Refused } from './api.ts';
import { type Host, OpenCase } from './open-case.ts';
import { Frame, type TitleBlock } from './page/frame.ts';
import { readPlace, writePlace } from './page/place.ts';
import { proposedForm, type TakenForm } from './sheets/drawn-case.ts';
import { emptySheet } from './sheets/empty-sheet.ts';
import { type GivenFile, readFiles, takeDrops } from './sheets/file-place.ts';
import { refusedSheet } from './sheets/refused-sheet.ts';
import { takenSheet } from './sheets/taken-sheet.ts';

/** What is said when an answer has not the form that the contract promises. */
const PAGE_FAULT: Refusal = {
  code: 'PAGE_FAULT',
  what: 'The page could not read what the service sent',
  where: {},
  remedy: 'Load the page again; if it happens twice, the page and the service are of different versions',
};

/** What a refusal may lead back to, and the text of the file it is about. */
interface Ways {
  readonly back?: () => void;
  readonly text?: string;
}

/** The page as a whole: which sheet is shown, what is asked of the service, what the title block says. */
export class App {
  readonly #frame: Frame;
  readonly #host: Host;
  #samples: readonly SampleView[] | undefined;
  #open: OpenCase | undefined;
  #lastChange = 'nothing yet';
  /** Counts what was asked for, so that an answer that comes too late is dropped. */
  #turn = 0;

  constructor(body: HTMLElement) {
    this.#frame = new Frame(body);
    this.#host = {
      frame: this.#frame,
      next: () => this.#next(),
      isCurrent: (turn) => turn === this.#turn,
      failed: (error, what) => this.#failed(error, what),
      refuse: (refusal, what) => this.#refuse(refusal, what),
      fill: (solver, more) => this.#fill(solver, more),
      another: () => this.#showEmpty(),
      changed: (words) => {
        this.#lastChange = words;
      },
    };
    takeDrops((files) => this.#takeFiles(files));
    addEventListener('keydown', (event) => {
      if (event.key === 'Escape') this.#open?.stop();
    });
  }

  /** Shows what the address names, else the empty sheet. */
  begin(): void {
    const place = readPlace();
    if (place === undefined) {
      this.#showEmpty();
      return;
    }
    const turn = this.#next();
    api.caseAgain(place.case).then(
      (theCase) => {
        if (turn === this.#turn) this.#openCase(theCase, 'opened again', place.layout, place.start);
      },
      (error: unknown) => {
        // A case that the service no longer keeps is no fault: begin anew.
        if (error instanceof Refused) this.#showEmpty();
        else this.#failed(error, 'The case');
      },
    );
  }

  #next(): number {
    this.#open?.letGo();
    return ++this.#turn;
  }

  #fill(solver: string, more: Partial<TitleBlock> = {}): void {
    this.#frame.fill({ case: 'none yet', solver, lastChange: this.#lastChange, ...more });
  }

  #showEmpty(): void {
    const turn = this.#next();
    this.#closeCase();
    writePlace(undefined);
    const draw = () => {
      const sheet = emptySheet({
        samples: this.#samples,
        openSample: (name) => this.#openSample(name),
        take: (files) => this.#takeFiles(files),
      });
      this.#frame.show('empty', ...sheet);
    };
    draw();
    this.#fill('Ready.');
    if (this.#samples !== undefined) return;
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
    this.#open?.dispose();
    this.#open = undefined;
    document.title = 'Tarry';
  }

  #openSample(name: string): void {
    this.#frame.solver('Opening the sample …');
    this.#ask(api.openSample(name), 'The sample', (theCase) => this.#openCase(theCase, 'opened a sample'));
  }

  /** Waits for the service; hands the answer on if nothing else was asked meanwhile. */
  #ask<T>(asked: Promise<T>, what: string, then: (answer: T) => void, ways: Ways = {}): void {
    const turn = this.#next();
    asked.then(
      (answer) => {
        if (turn === this.#turn) then(answer);
      },
      (error: unknown) => {
        if (turn === this.#turn) this.#failed(error, what, ways);
      },
    );
  }

  #takeFiles(files: readonly File[]): void {
    const turn = this.#next();
    readFiles(files).then(
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
    const others = given.filter((file) => file !== theCase);
    const [drawing] = others;
    if (theCase !== undefined) {
      const files = Object.fromEntries(others.map((file) => [file.name, file.text]));
      const upload: CaseUpload = { case: theCase.text, ...(others.length > 0 ? { files } : {}) };
      this.#frame.solver(`Reading ${theCase.name} …`);
      const refused = { text: theCase.text };
      this.#ask(
        api.openCase(upload),
        theCase.name,
        (view) => this.#openCase(view, `opened ${theCase.name}`),
        refused,
      );
    } else if (drawing !== undefined) {
      this.#frame.solver(`Reading ${drawing.name} …`);
      this.#ask(api.readDrawing(drawing.text, drawing.name), drawing.name, (view) =>
        this.#showTaken(drawing, view, proposedForm(view)),
      );
    }
  }

  #showTaken(file: GivenFile, drawing: DrawingView, form: TakenForm): void {
    this.#next();
    this.#closeCase();
    writePlace(undefined);
    const back = () => this.#showTaken(file, drawing, form);
    const open = (upload: CaseUpload) => {
      this.#frame.solver('Reading the drawing as a case …');
      this.#ask(api.openCase(upload), file.name, (view) => this.#openCase(view, `opened ${file.name}`), {
        back,
      });
    };
    this.#frame.show(
      'taken',
      ...takenSheet({ file, drawing, form, open, take: (files) => this.#takeFiles(files) }),
    );
    this.#lastChange = `read ${file.name}`;
    this.#fill('Waiting for you: what each shape is, and what catches.', {
      case: 'not opened yet',
      file: file.name,
      another: () => this.#showEmpty(),
    });
    this.#frame.say(`${drawing.shapes.length} shapes found in ${file.name}`);
  }

  #openCase(theCase: CaseView, change: string, layout?: string, start?: string): void {
    this.#next();
    this.#closeCase();
    this.#lastChange = change;
    document.title = `${theCase.title}, Tarry`;
    this.#open = new OpenCase(theCase, this.#host, layout, start);
    this.#open.solve();
  }

  #failed(error: unknown, what: string, ways: Ways = {}): void {
    if (error instanceof ConnectionLost) this.#lost();
    else this.#refuse(error instanceof Refused ? error.refusal : PAGE_FAULT, what, ways);
  }

  /** What is shown stays; the page asks every two seconds until the service answers again. */
  #lost(): void {
    const turn = this.#next();
    document.body.classList.add('lost');
    this.#open?.lost();
    this.#frame.solver('Connection lost: the service does not answer. What is shown is kept.');
    this.#frame.say('Connection lost.');
    const again = () => {
      if (turn !== this.#turn) return;
      api.samples().then(
        (samples) => {
          document.body.classList.remove('lost');
          this.#samples = samples;
          if (turn !== this.#turn) return;
          if (this.#open === undefined) this.#showEmpty();
          else this.#open.solve();
        },
        () => setTimeout(again, 2000),
      );
    };
    setTimeout(again, 2000);
  }

  #refuse(refusal: Refusal, what: string, { back, text }: Ways = {}): void {
    this.#next();
    const open = this.#open;
    const other = open?.other;
    const empty = { words: 'Back', act: () => this.#showEmpty() };
    const toOther =
      open === undefined || other === undefined
        ? empty
        : { words: `Back to ${other}`, act: () => open.chooseLayout(other) };
    const step = back === undefined ? toOther : { words: 'Back to the form', act: back };
    const sheet = refusedSheet({
      refusal,
      what,
      back: step,
      take: (files) => this.#takeFiles(files),
      ...(text === undefined ? {} : { text }),
    });
    this.#frame.show('refused', ...sheet);
    this.#fill('Not solved.', {
      case: open?.case.title ?? 'not opened',
      ...(open === undefined ? {} : { drawing: open.case.drawing }),
      another: () => this.#showEmpty(),
    });
  }
}
