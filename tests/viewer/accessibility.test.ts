import axe from 'axe-core';
import type { Browser } from 'playwright-core';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { launchBrowser } from '../support/browser.ts';
import { type Serving, startServing } from '../support/serving.ts';

let browser: Browser;
let serving: Serving;

beforeAll(async () => {
  [browser, serving] = await Promise.all([launchBrowser(), startServing()]);
}, 120_000);

afterAll(async () => {
  await browser?.close();
  await serving?.end();
});

for (const colorScheme of ['light', 'dark'] as const) {
  it(`has no serious violation that axe-core finds, empty and answered, ${colorScheme}`, async () => {
    const page = await browser.newPage({ viewport: { width: 1440, height: 900 }, colorScheme });
    await page.goto(serving.address);
    for (const state of ['empty', 'answered']) {
      if (state === 'answered') await page.getByRole('button', { name: 'Dish with a slit' }).click();
      await page.waitForFunction((wanted) => document.body.dataset['state'] === wanted, state, {
        timeout: 60_000,
      });
      await page.evaluate(axe.source);
      const { violations, passes } = await page.evaluate(() =>
        (globalThis as unknown as { axe: { run: () => Promise<axe.AxeResults> } }).axe.run(),
      );
      const serious = violations.filter((one) => one.impact === 'serious' || one.impact === 'critical');
      expect(serious.map((one) => `${state}: ${one.id} ${one.nodes[0]?.html ?? ''}`)).toEqual([]);
      expect(passes.length).toBeGreaterThan(10);
    }
    await page.close();
  });
}
