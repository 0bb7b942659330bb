import { mkdirSync, readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { join } from 'node:path';
import { chromium, type Browser, type Page } from 'playwright-core';
import { expect } from 'vitest';

const AXE = readFileSync(createRequire(import.meta.url).resolve('axe-core/axe.min.js'), 'utf8');

export const DESKTOP = { width: 1440, height: 900 };
export const PHONE = { width: 360, height: 800 };

/** Debian's Chromium with software rendering; as root it runs without its sandbox. */
export const openBrowser = (): Promise<Browser> =>
  chromium.launch({
    executablePath: '/usr/bin/chromium',
    args: [
      ...(process.getuid?.() === 0 ? ['--no-sandbox'] : []),
      '--use-gl=angle',
      '--use-angle=swiftshader',
      '--enable-unsafe-swiftshader',
      '--disable-background-networking',
      '--disable-component-update',
      '--disable-sync',
      '--no-first-run',
    ],
  });

/** A page of its own session that fails the test when the client throws or breaks the content security policy. */
export const openPage = async (browser: Browser, url: string, viewport = DESKTOP): Promise<Page> => {
  const context = await browser.newContext({ baseURL: url, viewport, acceptDownloads: true, reducedMotion: 'reduce' });
  const page = await context.newPage();
  page.setDefaultTimeout(60_000);
  page.on('pageerror', (error) => {
    throw error;
  });
  page.on('console', (message) => {
    if (/Content Security Policy/.test(message.text())) throw new Error(message.text());
  });
  return page;
};

/** Signs in by the form; the first time, reads and accepts the standing notes. */
export const signIn = async (page: Page, email: string, password: string): Promise<void> => {
  await page.goto('/sign-in');
  await page.getByLabel('E-mail').fill(email);
  await page.getByLabel('Password', { exact: true }).fill(password);
  await page.getByRole('button', { name: 'Sign in' }).click();
  await page.waitForURL((at) => !at.pathname.startsWith('/sign-in'));
  if (!new URL(page.url()).pathname.startsWith('/accept')) return;
  await page.getByRole('checkbox').check();
  await page.getByLabel(/name/i).fill('Somebody Present');
  await page.getByRole('button', { name: /Accept and go on/ }).click();
  await page.waitForURL((at) => !at.pathname.startsWith('/accept'));
};

/** Keeps a picture where SCREENSHOTS names a folder; elsewhere does nothing. */
export const picture = async (page: Page, name: string, fullPage = false): Promise<void> => {
  const folder = process.env.SCREENSHOTS;
  if (!folder) return;
  mkdirSync(folder, { recursive: true });
  await page.screenshot({ path: join(folder, `${name}.png`), fullPage });
};

/** No serious or critical finding of axe-core on the page as it stands, and no sideways scroll. */
export const expectAccessible = async (page: Page): Promise<void> => {
  await page.evaluate(AXE);
  const found = await page.evaluate(async () => {
    const { axe } = globalThis as unknown as {
      axe: { run: () => Promise<{ violations: { id: string; impact: string; nodes: { html: string }[] }[] }> };
    };
    const { violations } = await axe.run();
    return violations
      .filter(({ impact }) => impact === 'serious' || impact === 'critical')
      .map(({ id, nodes }) => `${id}: ${nodes.map(({ html }) => html.slice(0, 160)).join(' | ')}`);
  });
  expect(found, page.url()).toEqual([]);
  const overflow = await page.evaluate(
    () => document.documentElement.scrollWidth - document.documentElement.clientWidth,
  );
  expect(overflow, `sideways scroll at ${page.url()}`).toBeLessThanOrEqual(0);
};
