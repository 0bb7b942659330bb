import { readFileSync } from 'node:fs';
import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import type { ScenarioVersion } from '#contract/scenarios.ts';
import {
  coloursIn,
  expectAccessible,
  openBrowser,
  openPage,
  picture,
  pictureFailures,
  signIn,
  tabTo,
} from '../helpers/browser.ts';
import { newcomer } from '../helpers/newcomers.ts';
import { get, savedTrack } from '../helpers/shortcuts.ts';

const product = inject('product');
const charley = readFileSync(new URL('../data/tracks/AL032004_CHARLEY.txt', import.meta.url), 'utf8');
const track = `Charley, ring ${crypto.randomUUID().slice(0, 4)}`;

let browser: Browser;
let page: Page;

const button = (name: string | RegExp) => page.getByRole('button', { name });
const facts = () => page.getByRole('region', { name: 'What this ring does' });

beforeAll(async () => {
  const email = await newcomer(product, 'Runa Ringer', 'modeler');
  browser = await openBrowser();
  page = await openPage(browser, product.url);
  await signIn(page, email, product.password);
  await savedTrack(page, track, charley);
});
afterAll(() => browser?.close());
pictureFailures('ring-bench', () => page);

describe('a modeler at the ring bench', () => {
  it('sets a ring and sees four vortices predicted', async () => {
    await page.goto('/');
    await page.getByRole('navigation', { name: 'Main' }).getByRole('link', { name: 'Ring bench' }).click();
    await page.getByLabel('Maximum wind, 1 min, typed').fill('60');
    await page.getByLabel('Radius of maximum wind, typed').fill('30');
    await page.getByLabel('Grid points').selectOption('96');
    await facts().getByText('fastest wave, square').waitFor();
    await page.getByRole('img', { name: /^Vorticity 0 min after the start/ }).waitFor();
    await page.waitForURL(/points=96/);
    await expectAccessible(page);
    await picture(page, 'ring-bench-1-ring');
  });

  it('computes the breakdown, turns the picture round meanwhile, and steps to the four', async () => {
    await button('Compute the film').click();
    await page.getByRole('radio', { name: 'south' }).click();
    await page.getByText('two-dimensional, seen from above, clockwise').waitFor();
    await page.getByRole('radio', { name: 'north' }).click();
    await page.getByText('The film is computed: 37 frames.').waitFor({ state: 'attached' });
    const four = page.getByRole('img', { name: /: 4 vortices counted/ });
    await button('Step on').focus();
    for (let step = 0; step < 36 && (await four.count()) === 0; step += 1) await page.keyboard.press('.');
    await four.waitFor();
    expect(await coloursIn(page, four)).toBeGreaterThan(100);
    await expectAccessible(page);
    await picture(page, 'ring-bench-2-four', true);
  });

  it('takes the numbers along', async () => {
    for (const [name, file] of [
      ['Numbers, CSV', 'ring-breakdown.csv'],
      ['This frame, PNG', 'ring-frame.png'],
    ] as const) {
      const coming = page.waitForEvent('download');
      await button(name).click();
      const download = await coming;
      expect(download.suggestedFilename()).toBe(file);
      expect(readFileSync(await download.path()).length).toBeGreaterThan(1000);
    }
  });

  it('picks a thicker ring with a filled eye on the map by keyboard, and sees that nothing grows', async () => {
    await tabTo(page, page.getByRole('application', { name: /stability map/ }));
    await page.keyboard.press('Shift+ArrowLeft');
    for (let times = 0; times < 4; times += 1) await page.keyboard.press('Shift+ArrowUp');
    await facts().getByText('No vortices: growth below 0.02 of the average vorticity').waitFor();
    await page.waitForURL(/width=0\.45&eye=0\.6/);
    await page.getByRole('img', { name: /^Vorticity 0 min after the start/ }).waitFor();
    await expectAccessible(page);
    await picture(page, 'ring-bench-3-stable');
  });

  it('saves a ring to a scenario, which gets it at every fix of its next version', async () => {
    await page.goto('/ring-bench?wind=60&radius=30&width=0.25&eye=0.1&points=64');
    await facts()
      .getByText(/fastest wave/)
      .waitFor();
    await button('Save to scenario…').click();
    const dialog = page.getByRole('dialog', { name: 'Save the ring to a scenario' });
    await dialog.getByLabel('Scenario').selectOption({ label: `${track}, version 1` });
    await expectAccessible(page);
    await picture(page, 'ring-bench-4-save');
    await dialog.getByRole('button', { name: 'Save as version 2' }).click();
    await dialog.getByText(`Saved as version 2 of ${track}`).waitFor();
    const address = await dialog.getByRole('link', { name: 'See the scenario' }).getAttribute('href');
    const saved = await get<ScenarioVersion>(page, address!);
    expect(saved.number).toBe(2);
    for (const fix of saved.track.fixes) expect([fix.ringWidthFraction, fix.eyeVorticityRatio]).toEqual([0.25, 0.1]);
  });
});
