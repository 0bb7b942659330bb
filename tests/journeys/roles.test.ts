import { readFileSync } from 'node:fs';
import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import type { Edition } from '#contract/portfolios.ts';
import type { Run } from '#contract/runs.ts';
import type { ScenarioVersion } from '#contract/scenarios.ts';
import { expectAccessible, openBrowser, openPage, picture, signIn } from '../helpers/browser.ts';
import { locationFile } from '../helpers/location-file.ts';
import { finishedRun, get, savedTrack, sealedEdition, send } from '../helpers/shortcuts.ts';

const product = inject('product');
const charley = readFileSync(new URL('../data/tracks/AL032004_CHARLEY.txt', import.meta.url), 'utf8');
const READING = ['Home', 'Portfolios', 'Scenarios', 'Runs'];
const name = `Roles ${crypto.randomUUID().slice(0, 4)}`;

let browser: Browser;
let edition: Edition;
let track: ScenarioVersion;
let run: Run;

const as = async (local: string): Promise<Page> => {
  const page = await openPage(browser, product.url);
  await signIn(page, `${local}@saltmarsh.example`, product.password);
  return page;
};
const mainLinks = async (page: Page) =>
  (await page.getByRole('navigation', { name: 'Main' }).first().getByRole('listitem').allInnerTexts()).map((text) =>
    text.trim(),
  );

beforeAll(async () => {
  browser = await openBrowser();
  const page = await as('ines.halvard');
  edition = await sealedEdition(page, name, locationFile({ sites: 60, seed: 7, slips: { noCoordinates: 2 } }).bytes);
  track = await savedTrack(page, `Charley, ${name}`, charley);
  run = await finishedRun(page, edition.id, track.id);
  await page.context().close();
});
afterAll(() => browser?.close());

describe('each role comes home to its own work', () => {
  it.each([
    ['ines.halvard', 'Upload a schedule', [...READING, 'Billing', 'Limits of use']],
    ['teodor.brask', 'New scenario', [...READING, 'Ring bench', 'Validation', 'Billing', 'Limits of use']],
    ['oda.renn', 'Top up', ['Home', 'Runs', 'Billing', 'Limits of use']],
    ['pell.quist', null, [...READING, 'Validation', 'Billing', 'Limits of use']],
  ])('%s', async (local, action, links) => {
    const page = await as(local);
    await page
      .getByRole('cell', { name: new RegExp(name) })
      .first()
      .waitFor();
    expect(await mainLinks(page)).toEqual(links);
    const actions = page
      .getByRole('main')
      .getByRole('link', { name: /^(Upload a schedule|New scenario|Top up|New run)$/ });
    if (action) await actions.filter({ hasText: action }).first().waitFor();
    else expect(await actions.count()).toBe(0);
    await picture(page, `roles-home-${local}`);
    await expectAccessible(page);
    await page.context().close();
  });
});

describe('an auditor', () => {
  it('reads everything and is offered no change', async () => {
    const page = await as('pell.quist');
    const offers = page.getByRole('main').getByRole('button', {
      name: /^(Upload|Save|Seal|Accept|Cancel|Undo|Top up|Use this mapping|Quote|Add a fix|Remove)/,
    });
    const links = page
      .getByRole('main')
      .getByRole('link', { name: /^(Run this edition|New run|New scenario|Use in a run)/ });
    for (const [path, sign] of [
      ['/portfolios', name],
      [`/editions/${edition.id}`, 'S-00001'],
      [`/editions/${edition.id}?step=readiness`, 'Location quality'],
      ['/scenarios', `Charley, ${name}`],
      [`/scenarios/${track.scenarioId}`, 'saved by'],
      ['/runs', run.number],
      [`/runs/${run.id}`, 'Gross loss'],
      [`/runs/${run.id}?tab=sites`, 'S-00'],
      [`/runs/${run.id}?tab=slip`, 'Cautions'],
      ['/billing', 'Free to spend'],
    ] as const) {
      await page.goto(path);
      await page.getByText(sign).first().waitFor();
      await page.getByText('Auditor: read only').waitFor();
      expect(await offers.count(), path).toBe(0);
      expect(await links.count(), path).toBe(0);
      await picture(page, `roles-auditor${path.replaceAll(/[^a-z]+/g, '-').slice(0, 40)}`);
      await expectAccessible(page);
    }
    await page.context().close();
  });

  it('is refused every change by the service, too', async () => {
    const page = await as('pell.quist');
    for (const [method, path, data] of [
      ['POST', '/portfolios', { name: 'Mine', currency: 'USD' }],
      ['POST', `/editions/${edition.id}/fixes`, { code: 'PLACE-01', kind: 'exclude', reason: 'because' }],
      ['POST', `/editions/${edition.id}/seal`, { asAt: '2022-09-01' }],
      ['POST', `/scenarios/${track.scenarioId}/versions`, { track: track.track, basedOn: 1 }],
      ['POST', `/runs/${run.id}/cancel`, undefined],
      ['POST', '/billing/top-ups', { amountMinor: 25_000 }],
    ] as const)
      expect((await send(page, method, path, data)).status(), path).toBe(403);
    await page.context().close();
  });
});

describe('a modeler', () => {
  it('edits a track: what is filled is marked, and the change becomes a version', async () => {
    const page = await as('teodor.brask');
    await page.goto(`/scenarios/${track.scenarioId}`);
    const grid = page.getByRole('grid', { name: 'Fixes of the track' });
    await grid
      .getByText(/filled/)
      .first()
      .waitFor();
    const save = page.getByRole('button', { name: 'Save version 2' });
    expect(await save.getAttribute('aria-disabled')).toBe('true');
    await page.getByText('nothing changed yet').waitFor();
    const cell = grid.getByRole('row').nth(3).getByRole('gridcell').nth(3);
    await cell.dblclick();
    await cell.getByRole('textbox').fill('not a wind');
    await page.keyboard.press('Enter');
    await page.getByRole('alert').filter({ hasText: '“not a wind” isn’t a number' }).waitFor();
    await cell.getByRole('textbox').fill('31.5');
    await page.keyboard.press('Enter');
    await page.getByText('Draft of version 2').waitFor();
    await picture(page, 'roles-modeler-draft');
    await expectAccessible(page);
    await page.getByRole('button', { name: 'Undo' }).click();
    await page.getByText('Version 1, saved').waitFor();
    await cell.focus();
    await page.keyboard.press('F2');
    await cell.getByRole('textbox').fill('31.5');
    await page.keyboard.press('Enter');
    await save.click();
    await page.getByText('Version 2, saved').waitFor();
    const saved = await get<ScenarioVersion>(page, `/scenarios/${track.scenarioId}`);
    expect(saved.number).toBe(2);
    expect(saved.track.fixes[2]!.maxWindMs).toBeCloseTo(31.5, 6);
    expect(saved.createdBy).toBe('Teodor Brask');
    await page.context().close();
  });

  it('is told when somebody else saved meanwhile', async () => {
    const page = await as('teodor.brask');
    await page.goto(`/scenarios/${track.scenarioId}`);
    const grid = page.getByRole('grid', { name: 'Fixes of the track' });
    const cell = grid.getByRole('row').nth(2).getByRole('gridcell').nth(3);
    await cell.dblclick();
    await cell.getByRole('textbox').fill('22');
    await page.keyboard.press('Enter');
    const meanwhile = await get<ScenarioVersion>(page, `/scenarios/${track.scenarioId}`);
    const fixes = meanwhile.track.fixes.map((fix, index) =>
      index === 0 ? { ...fix, latitude: fix.latitude + 0.1 } : fix,
    );
    const reply = await send(page, 'POST', `/scenarios/${track.scenarioId}/versions`, {
      track: { ...meanwhile.track, fixes },
      basedOn: meanwhile.number,
    });
    expect(reply.status()).toBe(201);
    await page.getByRole('button', { name: /^Save version/ }).click();
    await page.getByRole('button', { name: 'Drop my changes, show the newest version' }).click();
    await page.getByText(`Version ${meanwhile.number + 1}, saved`).waitFor();
    await page.context().close();
  });
});

describe('coming and going', () => {
  it('goes on to the page asked for after signing in, and nowhere else after signing out', async () => {
    const page = await openPage(browser, product.url);
    await page.goto(`/runs/${run.id}?tab=sites&unit=kt`);
    await page.getByText(/Sign in to go on to/).waitFor();
    await picture(page, 'roles-deep-link');
    await expectAccessible(page);
    await page.getByLabel('E-mail').fill('ines.halvard@saltmarsh.example');
    await page.getByLabel('Password', { exact: true }).fill(product.password);
    await page.getByRole('button', { name: 'Sign in' }).click();
    await page.getByRole('columnheader', { name: 'Plain, kt' }).waitFor();
    await page.getByRole('button', { name: /Ines Halvard/ }).click();
    await page.getByRole('menuitem', { name: 'Sign out' }).click();
    await page.getByRole('heading', { name: 'Sign in' }).waitFor();
    await page.goto(`/runs/${run.id}`);
    await page.getByRole('heading', { name: 'Sign in' }).waitFor();
    expect((await page.request.get(`/api/v1/runs/${run.id}`)).status()).toBe(401);
    await page.goto('/sign-in?next=//elsewhere.example/');
    await page.getByLabel('E-mail').fill('ines.halvard@saltmarsh.example');
    await page.getByLabel('Password', { exact: true }).fill(product.password);
    await page.getByRole('button', { name: 'Sign in' }).click();
    await page.getByRole('heading', { name: /for you, Ines/ }).waitFor();
    expect(new URL(page.url()).origin).toBe(new URL(product.url).origin);
  });
});
