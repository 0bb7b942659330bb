import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, beforeEach, describe, expect, inject, it } from 'vitest';
import type { Portfolio } from '#contract/portfolios.ts';
import type { ScenarioSummary } from '#contract/scenarios.ts';
import type { Session } from '#contract/session.ts';
import { expectAccessible, openBrowser, openPage, picture, pictureFailures, signIn } from '../helpers/browser.ts';
import { newcomer } from '../helpers/newcomers.ts';
import { get } from '../helpers/shortcuts.ts';

const product = inject('product');
const folder = mkdtempSync(join(tmpdir(), 'gustloom-bad-input-'));
const PNG = Buffer.from(
  'iVBORw0KGgoAAAANSUhEUgAAAAEAAAABCAYAAAAfFcSJAAAADUlEQVR42mNkYPhfDwAChwGA60e6kgAAAABJRU5ErkJggg==',
  'base64',
);
const MEGABYTE = 1_000_000;

let browser: Browser;
let page: Page;

const button = (name: string | RegExp) => page.getByRole('button', { name });
const refusal = (text: string | RegExp) => page.getByRole('alert').filter({ hasText: text });
const loaded = async () => {
  const { items } = await get<{ items: Portfolio[] }>(page, '/portfolios?limit=500');
  return items.filter(({ draft, current }) => draft !== null || current !== null).length;
};
const scenarios = async () =>
  (await get<{ items: ScenarioSummary[] }>(page, '/scenarios?limit=500')).items.map(({ id }) => id).sort();
const station = async (name: string) => {
  await picture(page, `bad-input-${name}`);
  await expectAccessible(page);
};

beforeAll(async () => {
  const email = await newcomer(product, 'Birk Tallow', 'underwriter');
  browser = await openBrowser();
  page = await openPage(browser, product.url);
  // A track left unsaved asks before it lets one go.
  page.on('dialog', (dialog) => void dialog.accept());
  await signIn(page, email, product.password);
});
afterAll(async () => {
  await browser?.close();
  rmSync(folder, { recursive: true, force: true });
});
pictureFailures('bad-input', () => page);

describe('a schedule that can’t be read', () => {
  beforeEach(async () => {
    await page.goto('/portfolios?upload=new');
    await page.getByRole('heading', { name: 'Upload a schedule' }).waitFor();
  });

  it('is empty', async () => {
    const before = await loaded();
    const name = 'empty.csv';
    await page
      .getByLabel('Schedule', { exact: true })
      .setInputFiles({ name, mimeType: 'text/csv', buffer: Buffer.of() });
    await refusal('This file is empty. Choose the schedule as the broker sent it.').waitFor();
    await station('1-empty');
    await button('Upload and read').click();
    await refusal('This file is empty').waitFor();
    expect(await loaded()).toBe(before);
  });

  it('is a picture under another name', async () => {
    const before = await loaded();
    const name = 'schedule.csv';
    await page.getByLabel('Schedule', { exact: true }).setInputFiles({ name, mimeType: 'text/csv', buffer: PNG });
    await button('Upload and read').click();
    await refusal(/PNG picture.*CSV/).waitFor();
    await station('2-picture');
    expect(new URL(page.url()).pathname).toBe('/portfolios');
    expect(await loaded()).toBe(before);
  });

  it('is larger than the limit: told before anything is sent, and refused by the service', async () => {
    const before = await loaded();
    const path = join(folder, 'large.csv');
    writeFileSync(path, Buffer.alloc(60 * MEGABYTE, 'S-1,26.6,-81.8,250000\n'));
    await page.getByLabel('Schedule', { exact: true }).setInputFiles(path);
    await refusal(/60(\.0)? MB\. The limit is 50(\.0)? MB\. Split it/).waitFor();
    await station('3-large');
    await button('Upload and read').click();
    await refusal(/Split it/).waitFor();
    const { csrfToken } = await get<Session>(page, '/session');
    const made = await page.request.post('/api/v1/portfolios', {
      headers: { 'X-CSRF-Token': csrfToken, 'Idempotency-Key': crypto.randomUUID() },
      data: { name: 'Too large', currency: 'USD' },
    });
    const { id } = (await made.json()) as Portfolio;
    const reply = await page.request.post(`/api/v1/portfolios/${id}/files`, {
      headers: { 'X-CSRF-Token': csrfToken },
      multipart: {
        file: { name: 'large.csv', mimeType: 'text/csv', buffer: Buffer.alloc(60 * MEGABYTE, 'S-1,26.6\n') },
      },
    });
    expect(reply.status()).toBe(413);
    expect(((await reply.json()) as { detail: string }).detail).toMatch(/50 MB/);
    expect(await loaded()).toBe(before);
  });
});

describe('a track that can’t be run', () => {
  const HEADER = 'time_utc,latitude,longitude,max_wind_kt,central_pressure_hpa,wind_averaging_s';
  const csv = (...lines: string[]) => [HEADER, ...lines.map((line) => `${line},60`)].join('\n');
  let before: string[];

  const read = async (text: string) => {
    await page.getByLabel(/Best-track text/).fill(text);
    await button('Read the track').click();
  };
  const save = async (name: string) => {
    await page.getByLabel('Name').fill(name);
    await page.getByLabel('Source').fill('typed from a report');
    await button('Save scenario').click();
  };

  beforeEach(async () => {
    await page.goto('/scenarios/new');
    await page.getByLabel(/Best-track text/).waitFor();
    before = await scenarios();
  });

  it('is no track at all', async () => {
    await read('Dear Ines,\nplease find the storm attached.\n');
    await refusal('The track wasn’t read').waitFor();
    await station('4-no-track');
    expect(await scenarios()).toEqual(before);
  });

  it('has one fix', async () => {
    await read(csv('2022-09-28 18:00,26.6,-82.3,135,941'));
    await page
      .getByText('The track has one fix. Without a second there is no heading and no speed. Add a fix.')
      .waitFor();
    await station('5-one-fix');
    await save('One fix');
    await page.getByText('Not saved').waitFor();
    expect(await scenarios()).toEqual(before);
  });

  it('has its pressure in inches of mercury', async () => {
    await read(csv('2022-09-28 12:00,26.0,-82.7,140,27.67', '2022-09-28 18:00,26.6,-82.3,135,27.79'));
    await page
      .getByText(/Fix 1.*pressure 27\.67 looks like inches of mercury, not hPa\. In hPa it would be 937.*Convert/)
      .first()
      .waitFor();
    await station('6-inches');
    await save('Inches');
    await page.getByText('Not saved').waitFor();
    expect(await scenarios()).toEqual(before);
  });

  it('has its times out of order, until it is said that they may be sorted', async () => {
    await read(
      csv(
        '2022-09-28 18:00,26.6,-82.3,135,941',
        '2022-09-28 12:00,26.0,-82.7,140,937',
        '2022-09-29 00:00,27.2,-81.7,100,960',
      ),
    );
    await page
      .getByText(/Fix 2.*is earlier than the fix before it.*Sort the track by time/)
      .first()
      .waitFor();
    await station('7-out-of-order');
    const name = `Sorted ${crypto.randomUUID().slice(0, 4)}`;
    await save(name);
    await page.getByText('Not saved').waitFor();
    expect(await scenarios()).toEqual(before);
    await page.getByRole('checkbox', { name: 'Put the fixes in time order' }).check();
    await button('Save scenario').click();
    await page.getByText('Version 1, saved').waitFor();
    await station('8-sorted');
    const { items } = await get<{ items: ScenarioSummary[] }>(page, '/scenarios?limit=500');
    expect(items.find((item) => item.name === name)?.firstTime).toBe('2022-09-28T12:00:00.000Z');
  });
});
