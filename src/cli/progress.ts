import process from 'node:process';
import { Presets, SingleBar } from 'cli-progress';

/** Progress of one command: a bar where standard error is a terminal, nothing elsewhere. */
export interface Progress {
  readonly show: (doing: string, done: number) => void;
  readonly end: () => void;
}

export function progressBar(): Progress {
  if (!process.stderr.isTTY) return { show: () => undefined, end: () => undefined };
  const bar = new SingleBar(
    { format: '{bar} {percentage} %  {doing}', clearOnComplete: true, hideCursor: true, barsize: 24 },
    Presets.rect,
  );
  bar.start(1, 0, { doing: '' });
  return { show: (doing, done) => bar.update(done, { doing }), end: () => bar.stop() };
}

/** A signal that Ctrl-C raises; a second Ctrl-C ends the program at once. */
export function stopOnInterrupt(): { readonly signal: AbortSignal; readonly release: () => void } {
  const controller = new AbortController();
  const onInterrupt = (): void => {
    if (controller.signal.aborted) process.exit(130);
    controller.abort();
  };
  process.on('SIGINT', onInterrupt);
  return { signal: controller.signal, release: () => process.off('SIGINT', onInterrupt) };
}
