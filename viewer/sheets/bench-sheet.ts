import type { CaseView, JobView, LayoutView } from '../../src/service/contract.ts';
import { choice } from '../page/choice.ts';
import { button, el } from '../page/dom.ts';
import type { Field } from '../plan/field.ts';
import { PlanView } from '../plan/plan-view.ts';
import { catchingStretches } from '../plan/stretches.ts';
import { readings } from '../readings/readings.ts';
import { StripView } from '../strip/strip-view.ts';
import type { Answers } from '../words/answers.ts';
import { timeUnitFor } from '../words/display-unit.ts';
import type { Letters } from '../words/letters.ts';
import { decimalsFor, fixedText, withUnit } from '../words/number-text.ts';
import { planSummary, stretchWords } from './bench-words.ts';
import { textTwin } from './text-twin.ts';

/** A solved layout, ready to be shown. */
export interface Solved {
  readonly layout: LayoutView;
  readonly answers: readonly Answers[];
  readonly field: Field;
}

export interface BenchActions {
  readonly chooseLayout: (layout: string) => void;
  readonly chooseStart: (start: string) => void;
  readonly stop: () => void;
  readonly solve: () => void;
}

/** The bench of one case: sentence, plan, walls, readings; and the wait before there is an answer. */
export class BenchSheet {
  readonly parts: HTMLElement[];
  readonly #case: CaseView;
  readonly #letters: Letters;
  readonly #act: BenchActions;
  readonly #sentence = el('div', { class: 'sentence-place' });
  /** Where the words about a running solve stand, over the plan: nothing moves when they come and go. */
  readonly #work = el('div', { class: 'work' });
  readonly #left = el('div', { class: 'bench-left' });
  readonly #right = el('div', { class: 'bench-right' });
  readonly #line = el('i', { class: 'progress-line' });
  #plan: PlanView | undefined;
  #strip: StripView | undefined;
  #lift = 0;
  /** Layout of the answer on screen. */
  #shown: string | undefined;

  constructor(theCase: CaseView, letters: Letters, act: BenchActions) {
    this.#case = theCase;
    this.#letters = letters;
    this.#act = act;
    const main = el('div', { class: 'bench-main' }, this.#sentence, this.#work, this.#left);
    this.parts = [main, this.#right];
  }

  /** The sentence with the layout as a word that can be changed. */
  sentence(layout: string): void {
    const hadFocus = this.#sentence.contains(document.activeElement);
    const { layouts, reference } = this.#case;
    const name =
      layouts.length < 2
        ? el('span', { class: 'word-fixed' }, layout)
        : choice({
            label: 'Layout',
            items: layouts.map((one) => ({
              value: one,
              words: one,
              ...(one === reference ? { note: 'ref' } : {}),
            })),
            chosen: layout,
            choose: this.#act.chooseLayout,
          });
    this.#sentence.replaceChildren(
      el(
        'h1',
        { class: 'sentence' },
        'Layout ',
        name,
        ', showing the mean time until caught from every point.',
      ),
    );
    if (hadFocus) this.#sentence.querySelector('button')?.focus();
  }

  /** What is being done, as a line of 2 px and words; the last answer stays, struck lightly. */
  solving(job: JobView | undefined): void {
    this.#left.classList.toggle('stale', this.#plan !== undefined);
    this.#right.classList.toggle('stale', this.#plan !== undefined);
    const part = Math.round(100 * Math.min(1, Math.max(0, job?.done ?? 0)));
    this.#line.style.setProperty('width', `${part}%`);
    const words = job === undefined ? 'asking for the answer' : job.doing;
    this.#work.hidden = false;
    const known = this.#work.querySelector('.work-words');
    // After a stop or a lost connection other words stand there, without the line.
    if (known !== null && this.#line.isConnected)
      known.textContent = `${words}, ${part}\u00a0%${this.#stillShown()}`;
    else {
      this.#work.replaceChildren(
        this.#line,
        el('span', { class: 'work-words' }, words + this.#stillShown()),
        button('Stop', this.#act.stop, { class: 'quiet small' }),
        el('kbd', {}, 'Esc'),
      );
    }
  }

  /** The service does not answer: says so where the solve would be, and keeps what is shown. */
  lost(): void {
    if (this.#work.hidden) return;
    const words = `waiting for the service to answer again${this.#stillShown()}`;
    this.#work.replaceChildren(el('span', { class: 'work-words' }, words));
  }

  #stillShown(): string {
    return this.#shown === undefined ? '' : `; ${this.#shown} is still shown`;
  }

  /** The solve was stopped before there was an answer. */
  stopped(words: string): void {
    this.#work.replaceChildren(
      el('span', { class: 'work-words' }, words + this.#stillShown()),
      button('Solve it', this.#act.solve, { class: 'quiet small' }),
    );
  }

  /** Shows a solved layout. */
  show(solved: Solved, start: string): void {
    this.#work.hidden = true;
    this.#work.replaceChildren();
    this.#left.classList.remove('stale');
    this.#right.classList.remove('stale');
    this.dispose();
    const shown = solved.answers.find((one) => one.start === start) ?? solved.answers[0];
    if (shown === undefined) return;
    const { layout } = solved;
    this.#shown = layout.layout;
    const time = timeUnitFor(layout.longest.value, this.#case.units.time);
    const lengthUnit = this.#case.units.length;
    // Letters are given in the order of the answers, which is the same for all layouts of a case.
    for (const { name } of shown.shares) this.#letters.of(name);
    const letter = (wall: string) => this.#letters.of(wall);
    const words = { layout, shown, time, lengthUnit, letter };
    const readingsOf = layout.pins.map((pin) => shown.pins.find((one) => one.name === pin.name)?.mean.value);
    const decimals = decimalsFor(Math.max(0, ...readingsOf.map((value) => (value ?? 0) * time.factor)));
    this.#plan = new PlanView({
      layout,
      field: solved.field,
      lengthUnit,
      time,
      letter,
      start: shown.start,
      summary: planSummary(words),
      lift: this.#lift,
      lifted: (lift) => {
        this.#lift = lift;
      },
      pins: layout.pins.map((pin, i) => {
        const mean = readingsOf[i];
        const reading =
          mean === undefined ? '' : withUnit(fixedText(mean * time.factor, decimals), time.name);
        return { name: pin.name, at: pin.at, reading };
      }),
    });
    this.#strip = new StripView({
      layout,
      lengthUnit,
      letter,
      words: (stretch) => stretchWords(words, stretch),
      light: (stretch) => this.#plan?.light(stretch),
    });
    const twin = textTwin(words, catchingStretches(layout));
    this.#left.replaceChildren(this.#plan.element, this.#strip.element, twin);
    this.#strip.drawNow();
    this.#plan.drawNow();
    const hadFocus = this.#right.contains(document.activeElement);
    this.#right.replaceChildren(
      readings({
        case: this.#case,
        layout: layout.layout,
        all: solved.answers,
        shown,
        time,
        letter,
        choose: this.#act.chooseStart,
        width: Math.max(180, this.#right.clientWidth - 37),
      }),
    );
    if (hadFocus) this.#right.querySelector('button')?.focus();
  }

  dispose(): void {
    this.#plan?.dispose();
    this.#strip?.dispose();
    this.#plan = undefined;
    this.#strip = undefined;
  }
}
