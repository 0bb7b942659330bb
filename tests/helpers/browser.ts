import { mkdirSync, readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { join } from 'node:path';
import { chromium, type Browser, type Locator, type Page } from 'playwright-core';
import { afterEach, expect } from 'vitest';

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
  const context = await browser.newContext({
    baseURL: url,
    viewport,
    hasTouch: viewport.width < DESKTOP.width,
    acceptDownloads: true,
    reducedMotion: 'reduce',
  });
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

/** Keeps a picture of where a journey failed, too. */
export const pictureFailures = (journey: string, page: () => Page | undefined): void => {
  afterEach(async ({ task }) => {
    const at = page();
    if (task.result?.state === 'fail' && at && !at.isClosed()) await picture(at, `${journey}-failed`);
  });
};

/** No serious or critical finding of axe-core on the page as it stands, and no sideways scroll. */
export const expectAccessible = async (page: Page): Promise<void> => {
  await page.evaluate(AXE);
  await page.evaluate(() => new Promise((settled) => requestAnimationFrame(() => requestAnimationFrame(settled))));
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

/** How many different colours an element shows: one or two where a map or chart stayed blank. */
export const coloursIn = async (page: Page, element: Locator): Promise<number> => {
  const png = (await element.screenshot()).toString('base64');
  return page.evaluate(async (base64) => {
    const image = new Image();
    image.src = `data:image/png;base64,${base64}`;
    await image.decode();
    const canvas = document.createElement('canvas');
    [canvas.width, canvas.height] = [image.width, image.height];
    const context = canvas.getContext('2d')!;
    context.drawImage(image, 0, 0);
    return new Set(new Uint32Array(context.getImageData(0, 0, image.width, image.height).data.buffer)).size;
  }, png);
};

/** Presses Tab until the control has the focus, as one does without a mouse; it must show that it has it. */
export const tabTo = async (page: Page, control: Locator, most = 80): Promise<void> => {
  await control.waitFor();
  for (let pressed = 0; pressed <= most; pressed += 1) {
    const hasFocus = await control.evaluate((element) => element === document.activeElement);
    if (hasFocus) {
      const look = await control.evaluate((element) => {
        const { outlineStyle, boxShadow } = getComputedStyle(element);
        return outlineStyle !== 'none' || boxShadow !== 'none';
      });
      expect(look, 'the focus is visible').toBe(true);
      return;
    }
    await page.keyboard.press('Tab');
  }
  throw new Error(`${String(control)} wasn’t reached with ${most} presses of Tab`);
};
