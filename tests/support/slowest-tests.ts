import type { Reporter, TestModule } from 'vitest/node';

/** Prints the slowest tests at the end of a run, so that the suite stays under its time without guessing. */
export default class SlowestTests implements Reporter {
  readonly #count: number;

  constructor(count: number) {
    this.#count = count;
  }

  onTestRunEnd(modules: readonly TestModule[]): void {
    const times: { name: string; milliseconds: number }[] = [];
    for (const module of modules) {
      for (const test of module.children.allTests()) {
        const duration = test.diagnostic()?.duration ?? 0;
        times.push({ name: `${module.relativeModuleId}: ${test.fullName}`, milliseconds: duration });
      }
    }
    times.sort((a, b) => b.milliseconds - a.milliseconds);
    const lines = times
      .slice(0, this.#count)
      .map((t) => `${(t.milliseconds / 1000).toFixed(1).padStart(7)} s  ${t.name}`);
    process.stdout.write(`Slowest tests:\n${lines.join('\n')}\n`);
  }
}
