import { readFileSync } from 'node:fs';
import { parse } from 'csv-parse/sync';
import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import { NOTICE_THEMES, NOTICE_VERSION } from '#contract/notices.ts';
import type { Edition } from '#contract/portfolios.ts';
import type { Quote, Run, SiteDetail, SitesPage } from '#contract/runs.ts';
import { coloursIn, expectAccessible, openBrowser, openPage, picture, pictureFailures } from '../helpers/browser.ts';
import { locationFile, USUAL_SLIPS } from '../helpers/location-file.ts';
import { newcomer } from '../helpers/newcomers.ts';
import { get } from '../helpers/shortcuts.ts';

const product = inject('product');
const file = locationFile({ sites: 2500, seed: 20220928, preamble: [] });
const ian = readFileSync(new URL('../data/tracks/AL092022_IAN.txt', import.meta.url), 'utf8');

let browser: Browser;
let page: Page;
let email: string;
let run: Run;
let csv: Record<string, string>[];
/** Names of its own in data that other journeys share. */
const tag = crypto.randomUUID().slice(0, 4);
const portfolio = `Gulf shore ${tag}`;
const scenario = `Ian, as tracked ${tag}`;

const region = (name: string | RegExp) => page.getByRole('region', { name });
const button = (name: string | RegExp) => page.getByRole('button', { name });
const idIn = (pattern: RegExp) => pattern.exec(page.url())![1]!;
const number = (text: string) => Number(text.replaceAll(/[,\s]/g, ''));

/** The numbers of the row equation as the screen has them. */
const equation = async () => {
  const text = await region('Rows by state').innerText();
  const said = (label: string) => number(new RegExp(`${label}\\s+([\\d,]+)`).exec(text)![1]!);
  return {
    file: said('File rows'),
    ready: said('Ready'),
    notes: said('With notes'),
    held: said('Held'),
    aside: said('Set aside'),
  };
};
const expectEquation = async () => {
  const sum = await equation();
  expect(sum.ready + sum.notes + sum.held + sum.aside).toBe(sum.file);
  return sum;
};
const station = async (name: string) => {
  await picture(page, `underwriter-${name}`);
  await expectAccessible(page);
};

beforeAll(async () => {
  email = await newcomer(product, 'Ines Marsh', 'underwriter');
  browser = await openBrowser();
  page = await openPage(browser, product.url);
});
afterAll(() => browser?.close());
pictureFailures('underwriter', () => page);

describe('an underwriter, from the first sign-in to the export', () => {
  it('signs in and accepts the notes', async () => {
    await page.goto('/');
    await page.getByRole('heading', { name: 'Sign in' }).waitFor();
    await station('01-sign-in');
    await page.getByLabel('E-mail').fill(email);
    await page.getByLabel('Password', { exact: true }).fill('not my password');
    await button('Sign in').click();
    await page
      .getByRole('alert')
      .filter({ hasText: /e-mail|password/i })
      .waitFor();
    await page.getByLabel('Password', { exact: true }).fill(product.password);
    await button('Sign in').click();
    await page.getByRole('heading', { name: /Before your first run, Ines/ }).waitFor();
    for (const { title } of NOTICE_THEMES) await page.getByRole('heading', { name: title }).waitFor();
    await station('02-limits');
    await button('Accept and go on').click();
    await page.getByText('Tick this when you have read them.').waitFor();
    await page.getByRole('checkbox').check();
    await button('Accept and go on').click();
    await page.getByRole('heading', { name: /wait.* for you, Ines$/ }).waitFor();
    await page.getByText(/ balance − /).waitFor();
    await station('03-home');
  });

  it('uploads a messy schedule', async () => {
    await page.getByRole('link', { name: 'Upload a schedule' }).click();
    await page.getByRole('heading', { name: 'Upload a schedule' }).waitFor();
    await page
      .getByLabel('Schedule', { exact: true })
      .setInputFiles({ name: 'gulf_shore-2022.csv', mimeType: 'text/csv', buffer: file.bytes });
    expect(await page.getByLabel('Portfolio name').inputValue()).toBe('gulf shore 2022');
    await page.getByLabel('Portfolio name').fill(portfolio);
    await station('04-upload');
    await button('Upload and read').click();
    await page.getByRole('heading', { name: /Columns found/ }).waitFor();
  });

  it('says which column is which', async () => {
    const columns = page.getByRole('list', { name: 'Columns of the file' }).getByRole('listitem');
    expect(await columns.count()).toBe(27);
    expect(await page.getByLabel('Field for Site ref').inputValue()).toBe('site_ref');
    expect(await page.getByLabel('Field for BI').inputValue()).toBe('time_element_value');
    await page.getByLabel('Field for Account').selectOption({ label: 'Leave out' });
    await page.getByText(/1 column left out of the database:/).waitFor();
    await page.getByLabel('Field for Account').selectOption({ label: 'Account reference' });
    await page.getByLabel('Sites expected').fill('2500');
    await station('05-columns');
    await button('Use this mapping').click();
    await region('Rows by state').waitFor();
  });

  it('checks: every row is in one state, and a bulk fix can be undone', async () => {
    const messages = page.getByRole('table', { name: 'Messages by kind' });
    await messages.waitFor();
    const before = await expectEquation();
    expect(before.file).toBe(file.fileRows);
    await station('06-checks');

    const swap = async () => {
      await messages.getByRole('button', { name: /swapped/i }).click();
      await page.getByLabel('Reason', { exact: true }).fill('The broker’s columns were the other way round');
      await station('07-fix');
      await button(/^Swap/).last().click();
      await page.getByText(`: ${USUAL_SLIPS.swapped} rows changed.`).waitFor();
      await expect.poll(async () => (await expectEquation()).held).toBe(before.held - USUAL_SLIPS.swapped);
    };
    await swap();
    await button('Undo last fix').click();
    await expect.poll(expectEquation).toEqual(before);
    await swap();
    await station('08-fixed');
  });

  it('seals, knowing what stays out', async () => {
    const sum = await expectEquation();
    await page.getByRole('link', { name: 'To readiness' }).click();
    await page.getByRole('heading', { name: 'Seal edition 1' }).waitFor();
    await station('09-readiness');
    const seal = button('Seal edition 1');
    expect(await seal.getAttribute('aria-disabled')).toBe('true');
    await page.getByLabel('Values as at').fill('2022-09-01');
    const why = page.getByLabel('Why the totals differ');
    if (await why.isVisible()) await why.fill('The summary counts a few sites twice');
    await page.getByRole('checkbox', { name: new RegExp(`I know ${sum.held} rows aren’t scored`) }).check();
    await page.getByLabel('Reason', { exact: true }).fill('Asked the broker; no answer yet');
    await page.getByText(/Nothing blocks sealing/).waitFor();
    await station('10-seal');
    await seal.click();
    await page.getByRole('link', { name: 'Run this edition' }).waitFor();
    expect(await expectEquation()).toEqual(sum);
    await page.getByText(/Sealed .* by Ines Marsh/).waitFor();
    await station('11-sealed');
    const edition = await get<Edition>(page, `/editions/${idIn(/editions\/([^?]+)/)}`);
    expect(edition.state).toBe('sealed');
    expect(edition.digest).toMatch(/^[0-9a-f]{64}$/);
  });

  it('brings in a track as published', async () => {
    await page.getByRole('navigation', { name: 'Main' }).getByRole('link', { name: 'Scenarios' }).first().click();
    await page.getByRole('link', { name: 'New scenario' }).click();
    await page.getByLabel(/Best-track text/).fill(ian);
    await station('12-paste');
    await button('Read the track').click();
    await page.getByRole('grid', { name: 'Fixes of the track' }).waitFor();
    expect(await page.getByLabel('Name').inputValue()).toBe('Ian (AL092022)');
    await page.getByLabel('Name').fill(scenario);
    await page.getByLabel('Source').fill('Best track, revised after the season');
    await page.getByRole('list', { name: 'Findings' }).waitFor();
    await station('13-track');
    await button('Save scenario').click();
    await page.getByText('Version 1, saved').waitFor();
    await station('14-scenario');
  });

  it('asks for the price, which is known before the button', async () => {
    await page.getByRole('link', { name: 'Use in a run' }).click();
    await button(/^(Choose|Change) edition$/).click();
    await page.getByRole('dialog').getByText(`${portfolio}, edition 1`).click();
    await button('Use this one').click();
    await page.getByText(`${portfolio}, edition 1`, { exact: true }).waitFor();
    await station('15-set-up');
    await button('Quote this run').click();
    await page.getByRole('heading', { name: /^Quote Q/ }).waitFor();
    const quote = await get<Quote>(page, `/quotes/${idIn(/quote=([0-9a-f-]+)/)}`);
    const sum = await equationOfBalance();
    expect(sum.reserved).toBe(quote.grossMinor);
    expect(sum.free).toBe(quote.freeBalanceMinor);
    expect(sum.free - sum.reserved).toBe(sum.after);
    expect(quote.siteScenarios - quote.outOfReach).toBe(quote.units);
    await page.getByText(/30 sites stay unscored/).waitFor();
    await station('16-quote');
  });

  it('accepts, and sees the run finish without asking again', async () => {
    await button(/^Accept and run/).click();
    await region('Progress by track').waitFor();
    await picture(page, 'underwriter-17-progress');
    await region(`Gross loss, ${scenario}`).waitFor({ timeout: 180_000 });
    run = await get<Run>(page, `/runs/${idIn(/runs\/([0-9a-f-]+)/)}`);
    expect(run.state).toBe('complete');
    expect(run.chargedMinor).toBeLessThanOrEqual(run.quotedMinor);
  });

  it('reads a range first, with plain beside it', async () => {
    const gross = result().gross!;
    const headline = region(`Gross loss, ${scenario}`);
    const said = /USD\s+([\d.,]+)–([\d.,]+)\s+(million|billion)/.exec(await headline.innerText())!;
    const scale = { million: 1e8, billion: 1e11 }[said[3]!]!;
    for (const [shown, minor] of [
      [said[1]!, gross.p5],
      [said[2]!, gross.p95],
    ] as const)
      expect(Math.abs(number(shown) - minor / scale)).toBeLessThanOrEqual(0.5001 * lastPlace(shown));
    await headline.getByRole('img', { name: /enhanced .+ to .+, central .+; plain / }).waitFor();
    await expect.poll(() => coloursIn(page, region(`Footprint of ${scenario}`).locator('canvas'))).toBeGreaterThan(9);
    await station('18-overview');
  });

  it('switches the wind unit everywhere', async () => {
    await page.getByRole('radiogroup', { name: 'Wind unit' }).getByRole('radio', { name: 'mph' }).click();
    await expect.poll(() => page.getByRole('main').innerText()).not.toMatch(/\bm\/s\b/);
    expect(await page.getByRole('main').innerText()).toMatch(/\bmph\b/);
    await station('19-mph');
    await page.getByRole('link', { name: /^Sites/ }).click();
    const inMph = await firstRow();
    await page.getByRole('radiogroup', { name: 'Wind unit' }).getByRole('radio', { name: 'm/s' }).click();
    await page.getByRole('columnheader', { name: 'Plain, m/s' }).waitFor();
    const inMs = await firstRow();
    expect(inMs.ref).toBe(inMph.ref);
    expect(Math.abs(inMph.plain * 0.44704 - inMs.plain)).toBeLessThan(0.08);
  });

  it('sorts, filters and finds sites', async () => {
    await button('Plain, m/s').click();
    await page.locator('th[aria-sort="descending"]').filter({ hasText: 'Plain' }).waitFor();
    await expect.poll(shownPlain).toSatisfy((gusts: number[]) => gusts.length > 5 && isFalling(gusts));
    await button('Plain, m/s').click();
    await page.locator('th[aria-sort="ascending"]').filter({ hasText: 'Plain' }).waitFor();
    await station('20-sites');
    const all = await get<SitesPage>(page, `${sitesPath()}?limit=1`);
    const strong = await get<SitesPage>(page, `${sitesPath()}?limit=1&minGustMs=45`);
    expect(strong.total).toBeGreaterThan(0);
    expect(strong.total).toBeLessThan(all.total);
    await page.getByLabel('Gust above, m/s').fill('45');
    await page.getByLabel('Gust above, m/s').press('Enter');
    await page.getByText(new RegExp(`^${strong.total.toLocaleString('en-GB')} sites, TIV`)).waitFor();
    await page.getByLabel('Gust above, m/s').fill('99');
    await page.getByLabel('Gust above, m/s').press('Enter');
    await page.getByText(/No site above 99.0 m\/s/).waitFor();
    await button('Show all sites').click();
    await page.getByLabel(/Find a site/).fill('S-00017');
    await page.getByLabel(/Find a site/).press('Enter');
    await page.getByText(/^1 site, TIV/).waitFor();
  });

  it('takes the results away as a file that agrees with the screen', async () => {
    const [bytes, again] = [await exported(), await exported()];
    expect(again.equals(bytes)).toBe(true);
    csv = parse(bytes, { columns: true }) as Record<string, string>[];
    // No time of the export, or two exports of one result would differ; the version of the notices is a day, too.
    const today = new Date().toISOString().slice(0, 10);
    for (const { notice_version: _, ...line } of csv) expect(Object.values(line).join()).not.toContain(today);
    const all = await get<SitesPage>(page, `${sitesPath()}?limit=1`);
    expect(csv).toHaveLength(all.total);
    expect(csv.filter(({ reach }) => reach !== 'out_of_reach')).toHaveLength(result().sitesScored);
    for (const header of ['gust_plain_m_s', 'latitude_deg', 'tiv_usd', 'gross_mean_usd', 'hours_above_33_m_s'])
      expect(Object.keys(csv[0]!)).toContain(header);
    expect(new Set(csv.map(({ notice_version }) => notice_version))).toEqual(new Set([NOTICE_VERSION]));
    const sum = csv.reduce((cents, { gross_mean_usd }) => cents + BigInt((gross_mean_usd ?? '').replace('.', '')), 0n);
    expect(sum).toBe(BigInt(result().gross!.mean));
    expect(sum).toBe(BigInt(all.totals.grossMeanMinor));
  });

  it('opens a site: why this gust, and its way through the storm', async () => {
    const row = await firstRow();
    const line = csv.find(({ site_ref }) => site_ref === row.ref)!;
    expect(Math.abs(row.plain - Number(line.gust_plain_m_s))).toBeLessThan(0.06);
    await button(row.ref).click();
    const drawer = page.getByRole('complementary', { name: new RegExp(`^${row.ref}`) });
    await drawer.getByRole('heading', { name: 'Why this gust' }).waitFor();
    await drawer.getByRole('heading', { name: 'Gust through the storm' }).waitFor();
    const facts = await drawer.innerText();
    const [, low, high] = /Peak 3-s gust, enhanced\s+([\d.]+)(?:–([\d.]+))? m\/s/.exec(facts)!;
    expect(Math.abs(Number(low) - Number(line.gust_enhanced_p5_m_s))).toBeLessThan(0.06);
    expect(Math.abs(Number(high ?? low) - Number(line.gust_enhanced_p95_m_s))).toBeLessThan(0.06);
    const detail = await get<SiteDetail>(page, `${sitesPath()}/${line.site_no}`);
    const cents = (text: string | undefined) => Number((text ?? '').replace('.', ''));
    expect(detail.grossMeanMinor).toBe(cents(line.gross_mean_usd));
    expect(detail.groundUpPlainMinor).toBe(cents(line.ground_up_plain_usd));
    expect(detail.plainMs).toBeCloseTo(Number(line.gust_plain_m_s), 2);
    expect(detail.ladder.at(-1)!.afterMs).toBeCloseTo(detail.plainMs!, 1);
    await station('21-site');
    for (const toggle of await drawer.getByRole('button', { name: 'Table' }).all()) await toggle.click();
    expect(await drawer.getByRole('table').count()).toBe(2);
    await station('22-site-tables');
    await page.keyboard.press('Escape');
    await drawer.waitFor({ state: 'detached' });
  });

  it('sees the footprint on the map, and the same as a table', async () => {
    await page.getByRole('link', { name: 'Map', exact: true }).click();
    const map = region(`Footprint of ${scenario}`);
    await expect.poll(() => coloursIn(page, map.locator('canvas'))).toBeGreaterThan(9);
    for (const view of ['Plain', 'Difference', 'Enhanced', '90 %', '99 %', 'Median'])
      await map.getByRole('radio', { name: view, exact: true }).click();
    await page.getByText('Drawing the footprint …').waitFor({ state: 'hidden' });
    await station('23-map');
    await map.getByRole('button', { name: /^Table of what is in view/ }).click();
    const twin = map.getByRole('table');
    await twin.waitFor();
    expect(await twin.getByRole('row').count()).toBeGreaterThan(10);
    await station('24-map-table');
  });

  it('steps through single draws and the chance of a gust', async () => {
    const map = region(`Footprint of ${scenario}`);
    await map.getByRole('button', { name: /^Map/ }).click();
    const drawn = page.waitForResponse((response) => response.url().includes('view=draw'));
    await map.getByRole('radio', { name: 'One draw' }).click();
    await drawn;
    await map.getByText('none is likelier for one street').waitFor();
    await page.getByText('Working out this draw …').waitFor({ state: 'hidden' });
    const panel = page.getByRole('complementary', { name: 'In this draw' });
    await panel.getByRole('heading', { name: 'Sites by peak gust' }).waitFor();
    const stepper = map.getByRole('group', { name: 'Draws in the order of event loss' });
    await stepper.getByRole('button', { name: /^Draw at 95 %/ }).click();
    const rank = () => stepper.getByRole('status').innerText();
    const high = await rank();
    await page.keyboard.press('[');
    await expect.poll(rank).not.toBe(high);
    expect(new URL(page.url()).searchParams.get('view')).toBe('draw');
    await page.getByText('Working out this draw …').waitFor({ state: 'hidden' });
    await station('25-one-draw');
    await map.getByRole('radio', { name: 'Chance above' }).click();
    await page.getByText('Counting the draws above this gust …').waitFor({ state: 'hidden' });
    await map.getByText('not the chance of the storm').waitFor();
    await station('26-chance');
  });

  it('reads what the run rests on', async () => {
    await page.getByRole('link', { name: 'Run slip' }).click();
    await region('Edition').getByText(portfolio).waitFor();
    await region(`${scenario}, version 1`)
      .getByText(/averaged over 60 s/)
      .waitFor();
    await region('Model')
      .getByText(/CAL-1, version 1, signed/)
      .waitFor();
    for (const { code } of NOTICE_THEMES.slice(0, 5))
      await region('Cautions').getByText(code.replaceAll('-', ' '), { exact: false }).first().waitFor();
    await station('27-slip');
    await page.getByRole('navigation', { name: 'Main' }).getByRole('link', { name: 'Runs' }).first().click();
    await page.getByRole('link', { name: run.number }).first().waitFor();
    await station('28-runs');
  });
});

const result = () => run.scenarios[0]!.result!;
const sitesPath = () => `/runs/${run.id}/scenarios/${run.scenarios[0]!.id}/sites`;
const isFalling = (numbers: number[]) => numbers.every((value, index) => index === 0 || value <= numbers[index - 1]!);
/** Worth of the last digit shown: 0.1 for "41.2". */
const lastPlace = (shown: string) => 10 ** -(shown.split('.')[1]?.length ?? 0);
const siteRows = () => page.getByRole('table', { name: 'Site results' }).locator('tr[data-index]');
const plainOf = (cells: string[]) => Number(cells[3]);
const firstRow = async () => {
  const row = siteRows().first();
  const ref = await row.getByRole('button').innerText();
  return { ref, plain: plainOf(await row.getByRole('cell').allInnerTexts()) };
};
const shownPlain = async () => {
  const rows = await siteRows().all();
  return (await Promise.all(rows.map((row) => row.getByRole('cell').allInnerTexts())))
    .map(plainOf)
    .filter(Number.isFinite);
};
const exported = async () => {
  const [download] = await Promise.all([
    page.waitForEvent('download'),
    page.getByRole('link', { name: 'Export CSV' }).click(),
  ]);
  return readFileSync(await download.path());
};
/** Free − reserved by this run = free after, in cents, as the quote says it. */
const equationOfBalance = async () => {
  const text = await region('Quote').innerText();
  const said = (label: string) => Math.round(100 * number(new RegExp(`${label}\\s+−?\\s*([\\d,.]+)`).exec(text)![1]!));
  return { free: said('Free now'), reserved: said('Reserved by this run'), after: said('Free after acceptance') };
};
