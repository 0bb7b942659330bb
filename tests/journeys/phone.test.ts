import { readFileSync } from 'node:fs';
import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import {
  coloursIn,
  expectAccessible,
  openBrowser,
  openPage,
  PHONE,
  picture,
  pictureFailures,
  signIn,
} from '../helpers/browser.ts';
import { locationFile } from '../helpers/location-file.ts';
import { newcomer } from '../helpers/newcomers.ts';

const product = inject('product');
const ian = readFileSync(new URL('../data/tracks/AL092022_IAN.txt', import.meta.url), 'utf8');
const tag = crypto.randomUUID().slice(0, 4);
const portfolio = `Quay ${tag}`;
const scenario = `Ian, phone ${tag}`;

let browser: Browser;
let page: Page;

const button = (name: string | RegExp) => page.getByRole('button', { name });
const region = (name: string | RegExp) => page.getByRole('region', { name });
const bar = () => page.getByRole('navigation', { name: 'Main' });
const station = async (name: string) => {
  await picture(page, `phone-${name}`);
  await expectAccessible(page);
};
const goTo = async (place: string) => {
  await bar().getByRole('link', { name: place }).click();
  await page.getByRole('heading', { name: place, level: 1 }).waitFor();
  expect(await bar().getByRole('link', { name: place }).getAttribute('aria-current')).toBe('page');
};

beforeAll(async () => {
  const email = await newcomer(product, 'Runa Quay', 'underwriter');
  browser = await openBrowser();
  page = await openPage(browser, product.url, PHONE);
  await page.goto('/sign-in');
  await page.getByRole('heading', { name: 'Sign in' }).waitFor();
  await station('01-sign-in');
  await signIn(page, email, product.password);
});
afterAll(() => browser?.close());
pictureFailures('phone', () => page);

describe('an underwriter with a phone', () => {
  it('finds the way by the bar at the foot', async () => {
    await page.getByRole('heading', { name: /for you, Runa/ }).waitFor();
    await page.getByText(/ balance − /).waitFor();
    await station('02-home');
    for (const place of ['Scenarios', 'Runs', 'Portfolios']) {
      await goTo(place);
      await station(`03-${place.toLowerCase()}`);
    }
    await button('More').click();
    await page.getByRole('radio', { name: 'mph' }).click();
    await station('04-more');
    await page.getByRole('link', { name: 'Billing' }).click();
    await region('Free to spend').waitFor();
    await station('05-billing');
    await button('More').click();
    await page.getByRole('link', { name: 'Limits of use' }).first().click();
    await page.getByRole('heading', { name: 'Limits of use', level: 1 }).waitFor();
    await station('06-limits');
  });

  it('uploads, maps, checks and seals', async () => {
    await goTo('Portfolios');
    await button(/Upload a schedule|Choose a schedule/)
      .first()
      .click();
    const { bytes } = locationFile({ sites: 120, seed: 3, slips: { swapped: 4, noCoordinates: 2, noConstruction: 5 } });
    await page
      .getByLabel('Schedule', { exact: true })
      .setInputFiles({ name: 'quay.csv', mimeType: 'text/csv', buffer: bytes });
    await page.getByLabel('Portfolio name').fill(portfolio);
    await station('07-upload');
    await button('Upload and read').click();
    await page.getByRole('list', { name: 'Columns of the file' }).waitFor();
    await station('08-columns');
    await button('Use this mapping').click();
    await page.getByRole('table', { name: 'Messages by kind' }).waitFor();
    await station('09-checks');
    await page
      .getByRole('table', { name: 'Messages by kind' })
      .getByRole('button', { name: /swapped/ })
      .click();
    await page.getByLabel('Reason', { exact: true }).fill('The columns were the other way round');
    await button('Swap 4 rows').last().click();
    await page.getByText(': 4 rows changed.').waitFor();
    await station('10-fixed');
    await page.getByRole('link', { name: 'To readiness' }).click();
    await page.getByRole('checkbox', { name: /I know 2 rows aren’t scored/ }).check();
    await page.getByLabel('Reason', { exact: true }).fill('Asked the broker');
    await station('11-readiness');
    await button('Seal edition 1').click();
    await page.getByRole('link', { name: 'Run this edition' }).waitFor();
    await station('12-sealed');
  });

  it('brings in a track', async () => {
    await goTo('Scenarios');
    await page.getByRole('link', { name: 'New scenario' }).first().click();
    await page.getByLabel(/Best-track text/).fill(ian);
    await station('13-paste');
    await button('Read the track').click();
    await page.getByRole('list', { name: 'Findings' }).waitFor();
    await page.getByLabel('Name').fill(scenario);
    await station('14-track');
    await button('Save scenario').click();
    await page.getByText('Version 1, saved').waitFor();
    await station('15-scenario');
  });

  it('asks for the price and accepts it on the bar above the tabs', async () => {
    await page.getByRole('link', { name: 'Use in a run' }).click();
    await button(/^(Choose|Change) edition$/).click();
    await page.getByRole('dialog').getByText(`${portfolio}, edition 1`).click();
    await station('16-choice');
    await button('Use this one').click();
    await button('Quote this run').click();
    await page.getByRole('heading', { name: /^Quote Q/ }).waitFor();
    await station('17-quote');
    await button('Show how it adds up').click();
    await station('18-receipt');
    await button(/^Accept and run/)
      .last()
      .click();
    await region(`Gross loss, ${scenario}`).waitFor({ timeout: 180_000 });
  });

  it('reads the result', async () => {
    expect(await region(`Gross loss, ${scenario}`).innerText()).toMatch(/USD\s+[\d.,]+–[\d.,]+\s+(million|billion)/);
    await station('19-overview');
    await page.getByRole('link', { name: /^Sites/ }).click();
    await page.getByRole('columnheader', { name: /5–95 %, mph/ }).waitFor();
    await station('20-sites');
    const site = page
      .getByRole('table', { name: 'Site results' })
      .locator('tr[data-index]')
      .first()
      .getByRole('button');
    await site.click();
    await page.getByRole('heading', { name: 'Why this gust' }).waitFor();
    await station('21-site');
    await button('Close').click();
    await page.getByRole('link', { name: 'Map', exact: true }).click();
    await expect.poll(() => coloursIn(page, region(`Footprint of ${scenario}`).locator('canvas'))).toBeGreaterThan(9);
    await station('22-map');
    await page.getByRole('link', { name: 'Run slip' }).click();
    await region('Cautions').waitFor();
    await station('23-slip');
    await goTo('Runs');
    await page.getByText(portfolio).first().waitFor();
    await station('24-runs');
  });
});
