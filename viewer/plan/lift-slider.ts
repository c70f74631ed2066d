import { button, el } from '../page/dom.ts';

/** The slider that lifts the plan into the surface. It is vertical because it lifts. */
export class LiftSlider {
  readonly element: HTMLElement;
  readonly #handle: HTMLElement;
  readonly #track: HTMLElement;
  readonly #changed: (lift: number) => void;
  #lift = 0;
  #frame = 0;

  constructor(changed: (lift: number) => void) {
    this.#changed = changed;
    this.#handle = el('span', { class: 'handle' });
    const ticks = Array.from({ length: 5 }, () => el('i'));
    this.#track = el(
      'div',
      {
        class: 'track',
        role: 'slider',
        tabindex: 0,
        'aria-label': 'Lift',
        'aria-orientation': 'vertical',
        'aria-valuemin': 0,
        'aria-valuemax': 100,
      },
      ...ticks,
      this.#handle,
    );
    const up = button('lifted', () => this.glide(1), { class: 'plain' });
    const down = button('flat', () => this.glide(0), { class: 'plain' });
    this.element = el('div', { class: 'lift' }, up, this.#track, down);
    this.#track.addEventListener('keydown', (event) => this.#key(event));
    this.#track.addEventListener('pointerdown', (event) => this.#press(event));
    this.#show();
  }

  get lift(): number {
    return this.#lift;
  }

  /** Moves to a lift from 0 to 1, at once. */
  set(lift: number): void {
    this.#lift = Math.min(1, Math.max(0, Math.round(lift * 1000) / 1000));
    this.#show();
    this.#changed(this.#lift);
  }

  /** Moves there in 260 ms, slowing down; at once for those who asked for less motion. */
  glide(to: number): void {
    cancelAnimationFrame(this.#frame);
    if (matchMedia('(prefers-reduced-motion: reduce)').matches) {
      this.set(to);
      return;
    }
    const from = this.#lift;
    let began: number | undefined;
    const step = (now: number) => {
      began ??= now;
      const part = Math.min(1, (now - began) / 260);
      this.set(from + (to - from) * (1 - (1 - part) ** 3));
      if (part < 1) this.#frame = requestAnimationFrame(step);
    };
    this.#frame = requestAnimationFrame(step);
  }

  #show(): void {
    const percent = Math.round(this.#lift * 100);
    this.#handle.style.setProperty('bottom', `${(this.#lift * 100).toFixed(1)}%`);
    this.#track.setAttribute('aria-valuenow', String(percent));
    this.#track.setAttribute(
      'aria-valuetext',
      percent === 0 ? 'flat' : percent === 100 ? 'lifted' : `lifted ${percent} %`,
    );
  }

  #key(event: KeyboardEvent): void {
    const to: Record<string, number> = {
      ArrowUp: this.#lift + 0.1,
      ArrowRight: this.#lift + 0.1,
      ArrowDown: this.#lift - 0.1,
      ArrowLeft: this.#lift - 0.1,
      PageUp: this.#lift + 0.25,
      PageDown: this.#lift - 0.25,
      Home: 0,
      End: 1,
    };
    const lift = to[event.key];
    if (lift === undefined) return;
    event.preventDefault();
    cancelAnimationFrame(this.#frame);
    this.set(Math.round(lift * 100) / 100);
  }

  #press(event: PointerEvent): void {
    if (event.button !== 0) return;
    event.preventDefault();
    this.#track.focus();
    this.#track.setPointerCapture(event.pointerId);
    cancelAnimationFrame(this.#frame);
    const at = (y: number) => {
      const box = this.#track.getBoundingClientRect();
      return (box.bottom - y) / box.height;
    };
    const from = { y: event.clientY, onHandle: Math.abs(at(event.clientY) - this.#lift) < 0.06 };
    let moved = false;
    const move = (now: PointerEvent) => {
      if (Math.abs(now.clientY - from.y) > 2) moved = true;
      if (moved) this.set(at(now.clientY));
    };
    const end = () => {
      this.#track.removeEventListener('pointermove', move);
      this.#track.removeEventListener('pointerup', end);
      this.#track.removeEventListener('pointercancel', end);
      if (!moved && !from.onHandle) this.glide(Math.min(1, Math.max(0, at(from.y))));
    };
    this.#track.addEventListener('pointermove', move);
    this.#track.addEventListener('pointerup', end);
    this.#track.addEventListener('pointercancel', end);
  }
}
