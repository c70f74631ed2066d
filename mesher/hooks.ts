/** How a long computation is watched and ended from outside; polled at least every 20 ms of work. */
export interface Hooks {
  /** True when the work is to end now; the function then throws its `…_STOPPED` error. */
  readonly stop?: () => boolean;
  /** Told now and then how much of the work is done, 0 to 1. */
  readonly progress?: (done: number) => void;
}
