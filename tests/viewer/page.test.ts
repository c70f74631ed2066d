import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { launchBrowser } from '../support/browser.ts';
import { root } from '../support/run-tarry.ts';
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

/** A fresh page of the running service; whatever goes wrong on it is collected. */
async function openPage(): Promise<{ page: Page; troubles: string[] }> {
  const page = await browser.newPage({ viewport: { width: 1440, height: 900 } });
  const troubles: string[] = [];
  page.on('pageerror', (error) => troubles.push(error.message));
  page.on('console', (message) => {
    if (message.type() === 'error') troubles.push(message.text());
  });
  await page.goto(serving.address);
  await stateOf(page, 'empty');
  return { page, troubles };
}

async function stateOf(page: Page, state: string): Promise<void> {
  await page.waitForFunction((wanted) => document.body.dataset['state'] === wanted, state, {
    timeout: 60_000,
  });
}

/** How many different colours the view in three.js shows, read from its own pixels. */
async function coloursDrawn(page: Page): Promise<number> {
  return page.evaluate(() => {
    const canvas = document.querySelector('canvas');
    if (!canvas) return 0;
    const copy = document.createElement('canvas');
    copy.width = canvas.width;
    copy.height = canvas.height;
    const context = copy.getContext('2d');
    if (!context) return 0;
    context.drawImage(canvas, 0, 0);
    const { data } = context.getImageData(0, 0, copy.width, copy.height);
    const seen = new Set<number>();
    for (let i = 0; i < data.length; i += 4) {
      if (data[i + 3] !== 0)
        seen.add(((data[i] ?? 0) << 16) | ((data[i + 1] ?? 0) << 8) | (data[i + 2] ?? 0));
    }
    return seen.size;
  });
}

describe('the page in a real browser', () => {
  it('opens the sample, draws its plan and shows the figure with its unit', async () => {
    const { page, troubles } = await openPage();
    await page.getByRole('button', { name: 'Capture chamber, five posts' }).click();
    await stateOf(page, 'answered');
    await expect.poll(() => coloursDrawn(page), { timeout: 20_000 }).toBeGreaterThan(20);
    expect(await page.locator('body').innerText()).toMatch(/\d+\.?\d*\s*min\s*95 % caught within/);
    expect(troubles).toEqual([]);
    await page.close();
  });

  it('answers a dropped SVG drawing after its D and what catches are said', async () => {
    const { page, troubles } = await openPage();
    const text = readFileSync(join(root, 'meshes/drawing.svg'), 'utf8');
    const transfer = await page.evaluateHandle((svg) => {
      const given = new DataTransfer();
      given.items.add(new File([svg], 'drawing.svg', { type: 'image/svg+xml' }));
      return given;
    }, text);
    await page.dispatchEvent('body', 'drop', { dataTransfer: transfer });
    await stateOf(page, 'taken');
    // The largest closed shape is the frame of the sheet, not the compartment: say so.
    await page.getByRole('group', { name: 'rim' }).getByLabel('outline', { exact: true }).check();
    await page.getByRole('group', { name: 'bay' }).getByLabel('region').check();
    await page.getByLabel('It diffuses with D =').fill('1e-4 mm^2/s');
    await page.getByLabel('the whole outline catches').check();
    await page.getByRole('button', { name: 'Take it so' }).click();
    await stateOf(page, 'answered');
    await expect.poll(() => coloursDrawn(page), { timeout: 20_000 }).toBeGreaterThan(20);
    expect(troubles).toEqual([]);
    await page.close();
  });

  it('refuses a broken case with its place, and takes a good one afterwards', async () => {
    const { page } = await openPage();
    const bad =
      '{ "tarry": 1, "units": { "length": "mm", "time": "s" }, "drawing": { "outline": { "polygon": [[0,0],[1,1],[1,0],[0,1]] } }, "particle": { "diffusion": 1 }, "walls": { "w": { "on": "outline" } }, "layouts": { "a": { "w": "absorbing" } } }';
    const file = (name: string, content: string) => ({
      name,
      mimeType: 'application/json',
      buffer: Buffer.from(content),
    });
    await page.locator('input[type=file]').first().setInputFiles(file('bow.case.json', bad));
    await stateOf(page, 'refused');
    const said = await page.locator('body').innerText();
    expect(said).toMatch(/cross/);
    expect(said).toMatch(/0\.5/);
    expect(said).not.toMatch(/\bat .*\.[jt]s:\d+/);
    const good = bad.replace('[[0,0],[1,1],[1,0],[0,1]]', '[[0,0],[1,0],[1,1],[0,1]]');
    await page.locator('input[type=file]').first().setInputFiles(file('square.case.json', good));
    await stateOf(page, 'answered');
    await page.close();
  });

  it('changes layout and lift by keyboard alone', async () => {
    const { page } = await openPage();
    await page.getByRole('button', { name: 'Dish with a slit' }).press('Enter');
    await stateOf(page, 'answered');
    const slider = page.getByRole('slider').first();
    await slider.focus();
    await slider.press('End');
    await expect.poll(() => slider.getAttribute('aria-valuenow')).toMatch(/^(1|100)$/);
    await slider.press('Home');
    await expect.poll(() => slider.getAttribute('aria-valuenow')).toBe('0');
    await page.close();
  });
});
