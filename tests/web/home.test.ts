import { expect, it } from 'vitest';
import type { Portfolio } from '#contract/portfolios.ts';
import type { RunSummary } from '#contract/runs.ts';
import { decadeLabel, grossAxis } from '../../web/features/home/gross-axis.ts';
import { waitingItems } from '../../web/features/home/waiting.ts';
import { testReconciliation } from '../helpers/web-edition.ts';

const NOW = new Date('2026-12-18T09:40:00.000Z');

const portfolio = (name: string, draft: Portfolio['draft']): Portfolio => ({
  id: name,
  name,
  currency: 'USD',
  createdAt: '2026-01-01T00:00:00.000Z',
  current: null,
  draft,
  editions: [],
});
const draft = (state: 'mapping' | 'checking' | 'checked', held = 1): NonNullable<Portfolio['draft']> => ({
  id: `${state}-${held}`,
  number: 2,
  state,
  asAt: null,
  reconciliation:
    state === 'checked' ? { ...testReconciliation, held: { rows: held, tivMinor: held * 100_000_00 } } : null,
  updatedAt: '2026-12-17T10:00:00.000Z',
});
const run = (state: RunSummary['state'], finishedAt: string | null, p95Minor = 412e8): RunSummary => ({
  id: `${state}-${finishedAt}`,
  number: 'R-0418',
  portfolioId: 'p',
  portfolioName: 'Lodging 4471',
  editionId: 'e',
  editionNumber: 3,
  scenarioNames: ['Varrow'],
  state,
  purpose: 'exploratory',
  stamped: false,
  scenariosDone: 2,
  scenariosTotal: 3,
  currency: 'USD',
  grossPlainMinor: 158e8,
  gross: { p5: 186e8, p50: 268e8, p95: p95Minor, mean: 270e8 },
  priceCurrency: 'USD',
  quotedMinor: 2363,
  chargedMinor: null,
  acceptedAt: '2026-12-18T08:52:00.000Z',
  acceptedBy: 'Ines Halvard',
  finishedAt,
});

it('puts held rows and failures before drafts to carry on, and those before fresh results', () => {
  const items = waitingItems(
    [
      portfolio('Ready one', draft('checked', 0)),
      portfolio('Held one', draft('checked', 41)),
      portfolio('Being checked', draft('checking')),
    ],
    [run('complete', '2026-12-18T08:56:00.000Z'), run('failed', '2026-12-16T08:00:00.000Z')],
    NOW,
  );
  expect(items.map(({ title, when }) => [title, when])).toEqual([
    ['Held one has 41 rows held', 'Since 17 Dec'],
    ['R-0418 for Lodging 4471 stopped', 'Ended 16 Dec'],
    ['Ready one is ready to seal', 'Since 17 Dec'],
    ['R-0418 for Lodging 4471 is complete', 'Ended 08:56'],
  ]);
});

it('never states a lone loss: a result waits with its range', () => {
  const [item] = waitingItems([], [run('complete', '2026-12-18T08:56:00.000Z')], NOW);
  expect(item?.text).toBe('Gross USD 186–412 million, 5–95 %, on the track with the largest loss.');
});

it('forgets results after three days', () => {
  expect(waitingItems([], [run('complete', '2026-12-10T08:00:00.000Z')], NOW)).toEqual([]);
});

it('spans whole decades around all results', () => {
  const axis = grossAxis([run('complete', null), run('complete', null, 4120e8)])!;
  expect(axis.ticks.map((tick) => decadeLabel(tick, 'USD'))).toEqual(['10 m', '100 m', '1 bn', '10 bn']);
  expect(grossAxis([])).toBeNull();
});

it('offers a sealed edition nobody has run, only when all runs are known', () => {
  const sealed: Portfolio = {
    ...portfolio('Orchard Row', null),
    current: {
      id: 'e9',
      number: 1,
      state: 'sealed',
      asAt: '2026-11-30',
      reconciliation: null,
      updatedAt: '2026-12-18T07:00:00.000Z',
    },
  };
  expect(waitingItems([sealed], [], NOW).map(({ title }) => title)).toEqual([
    'Orchard Row, edition 1, hasn’t been run',
  ]);
  expect(waitingItems([sealed], null, NOW)).toEqual([]);
  expect(waitingItems([sealed], [{ ...run('complete', null), editionId: 'e9' }], NOW)).toEqual([]);
});
