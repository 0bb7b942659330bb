import { QueryClient, QueryClientProvider } from '@tanstack/react-query';
import { render, screen, waitFor } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { MemoryRouter } from 'react-router-dom';
import { beforeEach, describe, expect, it, vi } from 'vitest';
import type { SiteResult } from '#contract/runs.ts';
import { SitesTab } from '../../web/features/results/components/sites-tab.tsx';
import { UnitsProvider } from '../../web/lib/units.tsx';
import { answerRequests, ok, type Asked } from '../helpers/web-answers.ts';
import { testRun } from '../helpers/web-run.ts';

// jsdom lays nothing out; rows are drawn for a window of this height.
beforeEach(() => {
  vi.spyOn(HTMLElement.prototype, 'clientHeight', 'get').mockReturnValue(600);
  vi.spyOn(HTMLElement.prototype, 'clientWidth', 'get').mockReturnValue(800);
});

const run = testRun();
const scenario = run.scenarios[0]!;

const site = (siteNo: number): SiteResult => ({
  siteNo,
  siteRef: `S-${siteNo}`,
  label: 'Quay works',
  town: 'Harrow Quay',
  latitude: 30,
  longitude: -85,
  state: 'ready',
  locationQuality: 'building',
  assumed: [],
  tivMinor: 100_000_000,
  reach: 'scored',
  plainMs: 57.7,
  enhancedMeanMs: 59,
  p5Ms: 58.3,
  p50Ms: 58.8,
  p90Ms: 60.1,
  p95Ms: 60.4,
  p99Ms: 61,
  peakTime: '2026-09-03T08:12:00.000Z',
  directionDeg: 151,
  damagePlain: 0.059,
  damageMean: 0.068,
  damageP5: 0.063,
  damageP95: 0.078,
  groundUpPlainMinor: 5_900_000,
  groundUpMeanMinor: 6_800_000,
  grossPlainMinor: 4_860_000,
  grossMeanMinor: 5_620_000,
  grossP5Minor: 5_120_000,
  grossP50Minor: 5_600_000,
  grossP95Minor: 6_630_000,
});

const answer = ({ query }: Asked) => {
  const filtered = query.has('minGustMs') && Number(query.get('minGustMs')) > 60;
  const offset = Number(query.get('offset'));
  return ok({
    items: filtered ? [] : Array.from({ length: 100 }, (_, index) => site(offset + index + 1)),
    total: filtered ? 0 : 250,
    totals: { tivMinor: 1, groundUpMeanMinor: 1, grossMeanMinor: 1, grossPlainMinor: 1 },
    largestGustMs: 57.7,
    notices: [],
  });
};

const show = (unit = 'ms') => {
  const asked = answerRequests(answer);
  const onChooseSite = vi.fn();
  render(
    <QueryClientProvider client={new QueryClient({ defaultOptions: { queries: { retry: false } } })}>
      <MemoryRouter initialEntries={[`/?unit=${unit}`]}>
        <UnitsProvider personId="p">
          <SitesTab run={run} scenario={scenario} chosenSiteNo={null} onChooseSite={onChooseSite} />
        </UnitsProvider>
      </MemoryRouter>
    </QueryClientProvider>,
  );
  return { asked, onChooseSite, last: () => asked.at(-1)!.query };
};

describe('the sites tab', () => {
  it('asks the server for its order, strongest gross first', async () => {
    const { last } = show();
    await screen.findByText('S-1');
    expect(Object.fromEntries(last())).toEqual({ sort: 'gross', direction: 'desc', offset: '0', limit: '100' });
    await userEvent.click(screen.getByRole('button', { name: /^Plain/ }));
    await waitFor(() => expect(last().get('sort')).toBe('plain'));
    expect(last().get('direction')).toBe('desc');
    await userEvent.click(screen.getByRole('button', { name: /^Plain/ }));
    await waitFor(() => expect(last().get('direction')).toBe('asc'));
    expect(screen.getByRole('columnheader', { name: /^Plain/ })).toHaveAttribute('aria-sort', 'ascending');
  });

  it('draws only the rows in view of all there are', async () => {
    show();
    await screen.findByText('S-1');
    expect(screen.getByRole('table', { name: 'Site results' })).toHaveAttribute('aria-rowcount', '251');
    expect(screen.getAllByRole('row').length).toBeLessThan(60);
  });

  it('sends the gust filter in m/s whatever unit it was typed in, and says how to loosen it', async () => {
    const { last } = show('kt');
    await screen.findByText('S-1');
    await userEvent.type(screen.getByRole('textbox', { name: 'Gust above, kt' }), '120{Enter}');
    await screen.findByText(/No site above 120\.0 kt\. Lower the filter \(maximum 112\.2\)\./);
    // 120 kt × 1852/3600 m/s.
    expect(Number(last().get('minGustMs'))).toBeCloseTo(61.733, 3);
  });

  it('opens a site from its row', async () => {
    const { onChooseSite } = show();
    await userEvent.click(await screen.findByRole('button', { name: 'S-3' }));
    expect(onChooseSite).toHaveBeenCalledWith(3);
  });
});
