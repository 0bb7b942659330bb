import { randomUUID } from 'node:crypto';
import { describe, expect, it } from 'vitest';
import { encodeCursor } from '../../api/db/cursor.ts';
import { createTestApp } from '../helpers/app.ts';
import { intakeSteps, schedule, SOUND } from '../helpers/intake.ts';

const testApp = await createTestApp();
const browser = await testApp.signIn('underwriter');
const { newPortfolio, uploaded, check } = intakeSteps(testApp, browser);

const lines = Array.from({ length: 7 }, (_, i) => SOUND.replace('S-1', `S-${i + 1}`).replace('26.64', `26.${60 + i}`));
const portfolio = await newPortfolio();
for (let i = 0; i < 4; i += 1) await newPortfolio();
const edition = await check(await uploaded(portfolio.id, schedule(...lines)));

/** Everything a list gives, followed from page to page. */
const walk = async (path: string, limit: number) => {
  const items: Record<string, unknown>[] = [];
  const sizes: number[] = [];
  for (let cursor: string | null = null; ;) {
    const reply = await browser.get(`${path}?limit=${limit}${cursor === null ? '' : `&cursor=${cursor}`}`).expect(200);
    items.push(...reply.body.items);
    sizes.push(reply.body.items.length);
    cursor = reply.body.nextCursor as string | null;
    if (cursor === null) return { items, sizes };
  }
};

const rows = `/editions/${edition.id}/rows`;

describe('a list read page by page', () => {
  it('gives every portfolio once, in order of name', async () => {
    const { items, sizes } = await walk('/portfolios', 2);
    const names = items.map(({ name }) => name as string);
    expect(sizes).toEqual([2, 2, 1]);
    expect(new Set(names).size).toBe(5);
    expect(names).toEqual([...names].sort());
  });
  it('goes on after the longest names there can be, whatever is in them', async () => {
    const endings = ['a', 'b', 'c'];
    for (const filling of ['"', '\u0001', '台', 'x'])
      for (const ending of endings)
        await browser.post('/portfolios', { name: filling.repeat(119) + ending, currency: 'USD' }).expect(201);
    const { items, sizes } = await walk('/portfolios', 1);
    expect(sizes).toHaveLength(5 + 12);
    expect(new Set(items.map(({ id }) => id)).size).toBe(5 + 12);
  });
  it('gives every row of a file once, in the file’s order', async () => {
    const { items, sizes } = await walk(rows, 3);
    expect(sizes).toEqual([3, 3, 1]);
    expect(items.map(({ row }) => row)).toEqual([2, 3, 4, 5, 6, 7, 8]);
  });
});

describe('a cursor that isn’t one of ours', () => {
  const text = (word: string) => Buffer.from(word).toString('base64url');
  it.each([
    ['no cursor at all', '/portfolios', 'nonsense'],
    ['no cursor at all, of runs', '/runs', 'nonsense'],
    ['no moment, of runs', '/runs', encodeCursor('yesterday', randomUUID())],
    ['no id, of runs', '/runs', encodeCursor('2026-12-01T00:00:00.000Z', 'x')],
    ['a cursor of another list', '/portfolios', encodeCursor(7)],
    ['no name', '/portfolios', encodeCursor(7, randomUUID())],
    ['no id', '/portfolios', encodeCursor('Lodging 1', 'x')],
    ['a name with a zero byte', '/portfolios', encodeCursor('Lodging\0', randomUUID())],
    ['an object for a name', '/portfolios', text(`[{},"${randomUUID()}"]`)],
    ['no time', '/scenarios', encodeCursor('yesterday', randomUUID())],
    ['a time before any calendar of the database', '/scenarios', encodeCursor('0000-01-01T00:00:00Z', randomUUID())],
    ['no cursor at all', rows, 'nonsense'],
    ['a cursor of another list', rows, encodeCursor('Lodging 1', randomUUID())],
    ['a word for a row', rows, encodeCursor('three')],
    ['part of a row', rows, encodeCursor(1.5)],
    ['a row beyond what the database counts to', rows, encodeCursor(2 ** 31)],
    ['a row too great for any number', rows, text('[1e400]')],
  ])('is refused, never a failure of ours: %s at %s', async (_, path, cursor) => {
    const { body } = await browser.get(`${path}?cursor=${cursor}`).expect(422);
    expect(body).toMatchObject({ code: 'invalid_request', faults: [{ path: 'query.cursor' }] });
  });
  it('and the greatest row there can be is only the end', async () => {
    const { body } = await browser.get(`${rows}?cursor=${encodeCursor(2 ** 31 - 1)}`).expect(200);
    expect(body).toMatchObject({ items: [], nextCursor: null });
  });
});
