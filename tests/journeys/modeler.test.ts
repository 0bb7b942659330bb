import { readFileSync } from 'node:fs';
import type { Browser, Locator, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import type { Edition } from '#contract/portfolios.ts';
import type { ScenarioVersion } from '#contract/scenarios.ts';
import type { SpreadReply } from '#contract/studies.ts';
import {
  coloursIn,
  DESKTOP,
  expectAccessible,
  openBrowser,
  openPage,
  PHONE,
  picture,
  pictureFailures,
  signIn,
  tabTo,
} from '../helpers/browser.ts';
import { locationFile } from '../helpers/location-file.ts';
import { newcomer } from '../helpers/newcomers.ts';
import { savedTrack, sealedEdition } from '../helpers/shortcuts.ts';

const product = inject('product');
const file = locationFile({ sites: 400, seed: 20260903, preamble: [] });
const ian = readFileSync(new URL('../data/tracks/AL092022_IAN.txt', import.meta.url), 'utf8');
const tag = crypto.randomUUID().slice(0, 4);
const portfolio = `Reference shore ${tag}`;
const name = `Ian, settings ${tag}`;
const SPREAD_MS = 120_000;

let browser: Browser;
let page: Page;
let edition: Edition;
let scenario: ScenarioVersion;
let reply: SpreadReply;

const region = (label: string | RegExp) => page.getByRole('region', { name: label });
const button = (label: string | RegExp) => page.getByRole('button', { name: label });
const tab = (label: string) => page.getByRole('navigation', { name: 'Views of this scenario' }).getByText(label);
const table = () => page.getByRole('table', { name: 'What each setting does, changed alone' });
const field = (label: string) => page.getByRole('application', { name: label });
const time = () => page.getByRole('slider', { name: 'Time along the track' });
const station = async (label: string) => {
  await picture(page, `modeler-${label}`, true);
  await expectAccessible(page);
};
/** The same station on a tablet and a phone, and on a large screen at twice the zoom. */
const stationAtEveryWidth = async (label: string) => {
  await station(label);
  for (const [size, viewport] of [
    ['768', { width: 768, height: 1024 }],
    ['zoomed', { width: DESKTOP.width / 2, height: DESKTOP.height / 2 }],
    ['360', PHONE],
  ] as const) {
    await page.setViewportSize(viewport);
    await station(`${label}-${size}`);
  }
  await page.setViewportSize(DESKTOP);
};
/** Number at the end of a row of a small table: "Gust, 3-s, m/s 61.2" gives 61.2. */
const firstNumber = async (row: Locator, column: number) => Number(await row.getByRole('cell').nth(column).innerText());

beforeAll(async () => {
  const email = await newcomer(product, 'Teodor Lund', 'modeler');
  browser = await openBrowser();
  page = await openPage(browser, product.url);
  await signIn(page, email, product.password);
  edition = await sealedEdition(page, portfolio, file.bytes);
  scenario = await savedTrack(page, name, ian);
});
afterAll(() => browser?.close());
pictureFailures('modeler', () => page);

describe('a modeler asks what each setting does', () => {
  it('opens the settings of a scenario', async () => {
    await page.goto(`/scenarios/${scenario.scenarioId}`);
    await page.getByRole('heading', { name, level: 1 }).waitFor();
    await tab('Settings, one at a time').click();
    await page.getByLabel('At the sites of').selectOption(edition.id);
    await station('01-before');
  });

  it('runs the spread and reads the widest row', async () => {
    const answered = page.waitForResponse((response) => response.url().endsWith('/spread'), { timeout: SPREAD_MS });
    await button('Run the spread').click();
    await page.getByText('Trying one switch at a time.').waitFor();
    reply = (await (await answered).json()) as SpreadReply;
    await table().waitFor();
    expect(reply.rows.length).toBeGreaterThan(18);
    const changes = reply.rows.map(({ grossChangeMinor, reason }) => (reason ? -1 : Math.abs(grossChangeMinor ?? 0)));
    expect(changes).toEqual([...changes].sort((one, other) => other - one));
    const widest = table().getByRole('row').nth(1);
    const first = reply.rows[0]!;
    await widest.getByRole('rowheader').getByText(first.title, { exact: true }).waitFor();
    expect(await widest.innerText()).toContain(first.to.title);
    await page.getByText('Changes of the centre, one switch at a time.').waitFor();
    await page
      .getByText(/A chosen spread, not a forecast cone/)
      .first()
      .waitFor();
    const without = reply.rows.find(({ reason }) => reason !== null)!;
    await table().getByText(without.reason!).first().waitFor();
    await stationAtEveryWidth('02-spread');
  });

  it('reads both maxima of the strongest fix', async () => {
    const card = region('Intensity source');
    const { pressure, wind } = reply.intensity;
    const text = await card.innerText();
    expect(text).toContain(pressure!.maxWindMs.toFixed(1));
    expect(text).toContain(wind!.maxWindMs.toFixed(1));
    await card.getByRole('heading', { name: 'Why pressure is the default' }).waitFor();
  });

  it('sees the same as a table, and takes it away', async () => {
    await button('Table').click();
    const figures = page.getByRole('table', { name: 'Results with each setting changed alone' });
    expect(await figures.getByRole('row').count()).toBe(reply.rows.length + 2);
    await station('03-table');
    const [download] = await Promise.all([page.waitForEvent('download'), button('Download').click()]);
    const csv = readFileSync(await download.path(), 'utf8');
    expect(csv.split('\r\n')).toHaveLength(reply.rows.length + 2);
    expect(csv).toContain('A chosen spread, not a forecast cone');
    await button('Table').click();
  });

  it('tries another setting by key, as a draft, and goes back', async () => {
    const rows = table().getByRole('button');
    await tabTo(page, rows.first(), 120);
    await page.keyboard.press('ArrowDown');
    const second = reply.rows[1]!;
    await page.keyboard.press('Space');
    await page.getByText('1 setting changed, as a draft.').waitFor();
    expect(new URL(page.url()).searchParams.get('set')).toBe(`${second.choice}.${second.to.value}`);
    await page.getByText('Gross with 1 of the settings changed').waitFor({ timeout: SPREAD_MS });
    await station('04-draft');
    await button('Back to every default').click();
    await page.getByText('Gross with every default').waitFor({ timeout: SPREAD_MS });
  });
});

describe('a modeler looks at the wind itself', () => {
  it('opens the field at the strongest fix', async () => {
    await tab('Wind field').click();
    await field('Gust around the centre, Every default').waitFor();
    await expect.poll(() => coloursIn(page, page.locator('canvas').first())).toBeGreaterThan(9);
    await station('05-field');
  });

  it('moves time and cursor by key', async () => {
    await tabTo(page, time(), 120);
    const before = await time().getAttribute('aria-valuetext');
    const answered = page.waitForResponse((response) => response.url().endsWith('/wind-field'));
    await page.keyboard.press('ArrowRight');
    expect(await time().getAttribute('aria-valuetext')).not.toBe(before);
    await answered;
    await expect.poll(() => new URL(page.url()).searchParams.get('time')).not.toBeNull();
    await page.keyboard.press('PageDown');
    const numbers = region('Under the cursor');
    await field('Gust around the centre, Every default').focus();
    await page.keyboard.press('Home');
    await numbers.getByText(/^0 km/).first().waitFor();
    await page.keyboard.press('End');
    const gust = await firstNumber(numbers.getByRole('row', { name: /^Gust/ }), 0);
    const strongest = await firstNumber(
      region('The storm at this time').getByRole('row', { name: /^Strongest gust/ }),
      0,
    );
    expect(gust).toBeCloseTo(strongest, 6);
    await page.getByRole('slider', { name: 'Radius read out' }).focus();
    await page.keyboard.press('End');
    await page.getByText(/^At 200\.0 km:/).waitFor();
  });

  it('compares Kepert with the default', async () => {
    await page.getByLabel('Asymmetry from motion').selectOption('kepert');
    await region('Wind field, B').getByText('Asymmetry from motion: Kepert 2001 boundary layer').waitFor();
    await field('Gust around the centre, A, every default').waitFor();
    expect(new URL(page.url()).searchParams.get('set')).toBe('asymmetry.kepert');
    await region('Settings of B').getByText('1 difference').waitFor();
    const row = region('The storm at this time').getByRole('row', { name: /^Strongest gust/ });
    const [a, b, difference] = (await row.getByRole('cell').allInnerTexts()).map((text) =>
      Number(text.replace('−', '-').replaceAll(/[+\s]/g, '')),
    );
    expect(b! - a!).toBeCloseTo(difference!, 0);
    await expect.poll(() => coloursIn(page, page.locator('canvas').nth(1))).toBeGreaterThan(9);
    await stationAtEveryWidth('06-compare');
  });

  it('reads everything in another unit', async () => {
    await page.getByRole('radiogroup', { name: 'Wind unit' }).getByRole('radio', { name: 'kt' }).click();
    await expect.poll(() => page.getByRole('main').innerText()).not.toMatch(/\bm\/s\b/);
    await station('07-knots');
  });
});
