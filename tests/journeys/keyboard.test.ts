import { readFileSync } from 'node:fs';
import type { Browser, Locator, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import type { Edition } from '#contract/portfolios.ts';
import type { Run } from '#contract/runs.ts';
import { openBrowser, openPage, picture, pictureFailures, signIn, tabTo } from '../helpers/browser.ts';
import { locationFile } from '../helpers/location-file.ts';
import { newcomer } from '../helpers/newcomers.ts';
import { get, savedTrack } from '../helpers/shortcuts.ts';

const product = inject('product');
const charley = readFileSync(new URL('../data/tracks/AL032004_CHARLEY.txt', import.meta.url), 'utf8');
const tag = crypto.randomUUID().slice(0, 4);
const portfolio = `Keys ${tag}`;
const track = `Charley, keys ${tag}`;

let browser: Browser;
let page: Page;

const button = (name: string | RegExp) => page.getByRole('button', { name });
const press = async (control: Locator, key = 'Enter') => {
  await tabTo(page, control);
  await page.keyboard.press(key);
};
const type = async (control: Locator, text: string) => {
  await tabTo(page, control);
  await page.keyboard.press('Control+A');
  await page.keyboard.type(text);
};

beforeAll(async () => {
  const email = await newcomer(product, 'Tove Keyes', 'underwriter');
  browser = await openBrowser();
  page = await openPage(browser, product.url);
  await signIn(page, email, product.password);
  await savedTrack(page, track, charley);
});
afterAll(() => browser?.close());
pictureFailures('keyboard', () => page);

describe('an underwriter without a mouse', () => {
  it('skips to the content and uploads', async () => {
    await page.goto('/');
    await page.getByRole('heading', { name: /for you, Tove/ }).waitFor();
    await page.keyboard.press('Tab');
    const skip = page.getByRole('link', { name: 'Skip to content' });
    expect(await skip.evaluate((element) => element === document.activeElement)).toBe(true);
    await picture(page, 'keyboard-1-skip');
    await page.keyboard.press('Enter');
    expect(await page.getByRole('main').evaluate((element) => element === document.activeElement)).toBe(true);
    await press(page.getByRole('main').getByRole('link', { name: 'Upload a schedule' }));
    const choosing = page.waitForEvent('filechooser');
    await press(button('Choose a file'));
    const { bytes } = locationFile({ sites: 80, seed: 11, slips: { swapped: 3 } });
    await (await choosing).setFiles({ name: 'keys.csv', mimeType: 'text/csv', buffer: bytes });
    await type(page.getByLabel('Portfolio name'), portfolio);
    await press(button('Upload and read'));
    await page.getByRole('list', { name: 'Columns of the file' }).waitFor();
  });

  it('maps, mends and seals', async () => {
    await press(button('Use this mapping'));
    await press(page.getByRole('table', { name: 'Messages by kind' }).getByRole('button', { name: /swapped/ }));
    await type(page.getByLabel('Reason', { exact: true }), 'The other way round');
    await picture(page, 'keyboard-2-mend');
    await page.keyboard.press('Control+Enter');
    await page.getByText(': 3 rows changed.').waitFor();
    await press(page.getByRole('link', { name: 'To readiness' }));
    await page.getByText('Nothing blocks sealing.').waitFor();
    await press(button('Seal edition 1'));
    await page.getByRole('link', { name: 'Run this edition' }).waitFor();
    const [, id] = /editions\/([0-9a-f-]+)/.exec(page.url())!;
    expect((await get<Edition>(page, `/editions/${id}`)).state).toBe('sealed');
  });

  it('asks for a price, accepts it and reads the result', async () => {
    await press(page.getByRole('link', { name: 'Run this edition' }));
    await page.getByText(`${portfolio}, edition 1`).waitFor();
    await page.getByRole('heading', { name: /^New run/ }).waitFor();
    await page.keyboard.press('2');
    await press(button(/^(Choose|Change) scenarios$/));
    await press(page.getByRole('checkbox', { name: new RegExp(track) }), 'Space');
    await picture(page, 'keyboard-3-choice');
    await press(button('Use this track'));
    await press(button('Quote this run'));
    await page.getByRole('heading', { name: /^Quote Q/ }).waitFor();
    await page.keyboard.press('Control+Enter');
    await picture(page, 'keyboard-4-quote');
    await press(button(/^Accept and run/), 'Enter');
    await page.getByRole('region', { name: `Gross loss, ${track}` }).waitFor({ timeout: 180_000 });
    const [, id] = /runs\/([0-9a-f-]+)/.exec(page.url())!;
    expect((await get<Run>(page, `/runs/${id}`)).state).toBe('complete');
    await press(page.getByRole('link', { name: /^Sites/ }));
    await press(page.getByRole('table', { name: 'Site results' }).locator('tr[data-index="0"]').getByRole('button'));
    const drawer = page
      .getByRole('complementary')
      .filter({ has: page.getByRole('heading', { name: 'Why this gust' }) });
    await drawer.waitFor();
    await page.keyboard.press('Escape');
    await drawer.waitFor({ state: 'detached' });
  });
});
