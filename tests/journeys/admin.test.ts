import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import type { Balance, Movement } from '#contract/billing.ts';
import { expectAccessible, openBrowser, openPage, picture, pictureFailures, signIn } from '../helpers/browser.ts';
import { get } from '../helpers/shortcuts.ts';

const product = inject('product');
let browser: Browser;
let page: Page;

const button = (name: string | RegExp) => page.getByRole('button', { name });
const freeMinor = async () => (await get<Balance>(page, '/billing/balance')).freeMinor;
const topUps = async () =>
  (await get<{ items: Movement[] }>(page, '/billing/movements')).items.filter(({ kind }) => kind === 'top_up').length;
const shown = async () => {
  const text = await page.getByRole('region', { name: 'Free to spend' }).innerText();
  return Math.round(100 * Number(/([\d,]+\.\d\d)/.exec(text)![1]!.replaceAll(',', '')));
};
const station = async (name: string) => {
  await picture(page, `admin-${name}`);
  await expectAccessible(page);
};
/** From the billing page to the provider's, with an amount and a card. */
const pay = async (amount: string, card: string) => {
  await page.getByLabel('Amount').fill(amount);
  await button(/^Pay USD/).click();
  await page.getByRole('heading', { name: 'Pay by card' }).waitFor();
  await page.getByRole('radio', { name: new RegExp(card) }).check();
  await button(/^Pay /).click();
};

beforeAll(async () => {
  browser = await openBrowser();
  page = await openPage(browser, product.url);
  await signIn(page, 'oda.renn@saltmarsh.example', product.password);
});
afterAll(() => browser?.close());
pictureFailures('admin', () => page);

describe('an account admin', () => {
  it('comes home to runs and money, without a word about sites', async () => {
    await page.getByRole('heading', { name: /^Good to see you, Oda/ }).waitFor();
    await page.getByText('for accepted quotes').waitFor();
    const links = page.getByRole('navigation', { name: 'Main' }).getByRole('link');
    expect((await links.allInnerTexts()).map((text) => text.trim()).filter(Boolean)).toEqual(
      expect.arrayContaining(['Home', 'Runs', 'Billing', 'Limits of use']),
    );
    for (const name of ['Portfolios', 'Scenarios'])
      expect(await page.getByRole('link', { name, exact: true }).count()).toBe(0);
    await station('1-home');
  });

  it('tops up on the provider’s page; the money arrives once', async () => {
    const [before, credited] = [await freeMinor(), await topUps()];
    await page.getByRole('link', { name: 'Top up' }).click();
    await page.getByRole('heading', { name: 'Billing', level: 1 }).waitFor();
    expect(await shown()).toBe(before);
    await station('2-billing');
    await button('Top up').click();
    await page.getByLabel('Amount').fill('2');
    await button(/^Pay/).click();
    await page.getByText('The smallest top-up is USD 10.00.').waitFor();
    await station('3-amount');
    await pay('250.00', '4242');
    await page.getByText('USD 250.00 credited').waitFor();
    await expect.poll(shown).toBe(before + 25_000);
    await station('4-credited');
    await page.reload();
    await page.getByText('USD 250.00 credited').waitFor();
    expect(await freeMinor()).toBe(before + 25_000);
    expect(await topUps()).toBe(credited + 1);
  });

  it('is told why a card was declined, and nothing moves', async () => {
    const before = await freeMinor();
    await button('Close').click();
    await button('Top up').click();
    await pay('100.00', '9995');
    await page.getByRole('alert').filter({ hasText: 'Your card has insufficient funds.' }).waitFor();
    await picture(page, 'admin-5-declined');
    await page.getByRole('link', { name: 'Go back without paying' }).click();
    await page.getByText(/wasn’t paid|came back without paying/).waitFor();
    await station('6-back');
    expect(await freeMinor()).toBe(before);
    expect(await shown()).toBe(before);
  });

  it('is refused site pages in words, by the client and by the service', async () => {
    for (const path of ['/portfolios', '/scenarios']) {
      await page.goto(path);
      await page
        .getByText(/no site data/)
        .first()
        .waitFor();
      await station(`7-refused-${path.slice(1)}`);
      await page.getByRole('link', { name: 'To Home' }).waitFor();
    }
    for (const path of ['/portfolios', '/scenarios', '/curve-sets']) {
      const reply = await page.request.get(`/api/v1${path}`);
      expect(reply.status()).toBe(403);
      expect(((await reply.json()) as { code: string }).code).toBe('not_allowed');
    }
  });
});
