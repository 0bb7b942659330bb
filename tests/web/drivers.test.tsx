import { QueryClient, QueryClientProvider } from '@tanstack/react-query';
import { render, screen, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { MemoryRouter } from 'react-router-dom';
import { describe, expect, it } from 'vitest';
import type { Drivers as Reply } from '#contract/drivers.ts';
import type { SpreadRow } from '#contract/studies.ts';
import { Drivers } from '../../web/features/results/components/drivers.tsx';
import { dominantWords, driverRanges } from '../../web/features/results/driver-ranges.ts';
import { UnitsProvider } from '../../web/lib/units.tsx';
import { answerRequests, ok, refusal } from '../helpers/web-answers.ts';

const at = { runId: '00000000-0000-4000-8000-000000000001', runScenarioId: '00000000-0000-4000-8000-000000000011' };
const gross = (p50: number) => ({ plain: p50, p5: p50, p50, p95: p50, mean: p50 });
const row = (choice: string, title: string, from: string, to: string, gust: number, change: number): SpreadRow => ({
  ...{ choice, title, from: { value: from, title: from }, to: { value: to, title: to, source: 'judged' } },
  ...{ peakGustMs: { plain: 60, p5: 60, p50: 62 + gust, p95: 66 }, peakGustChangeMs: gust },
  ...{ grossMinor: gross(20_000_000_000 + change), grossChangeMinor: change, reason: null },
});
const ROWS: SpreadRow[] = [
  row('regime', 'Amplitude regime', 'Mixed', 'Always breaking down', 2.4, 3_000_000_000),
  row('ringWidth', 'Ring width over radius of maximum wind', '0.35', '0.25', 1.6, 2_000_000_000),
  row('ringWidth', 'Ring width over radius of maximum wind', '0.35', '0.45', -1.3, -1_500_000_000),
  row('mesovortices', 'Mesovortices', 'On', 'Off', -2, -2_000_000_000),
  { ...row('anchor', 'Anchor', 'auto', 'mean', 0, 0), reason: 'Every fix takes its maximum from the pressure.' },
  row('anchor', 'Anchor', 'auto', 'peak', -0.4, -500_000_000),
];
const REPLY: Reply = {
  engineVersion: 'e',
  sites: { used: 200, of: 604, rule: 'The 200 sites with the largest gross, of 604 within 1000 km of the track.' },
  currency: 'USD',
  curve: 'Cubic',
  base: { peakGustMs: { plain: 60, p5: 60, p50: 62, p95: 66 }, strongestSite: 'A', grossMinor: gross(20_000_000_000) },
  rows: ROWS,
  ring: { width: [0.35, 0.35], eyeRatio: [0.2, 0.2] },
  mesovortices: true,
  notices: [],
};

const show = (answer: Reply | 'fails', siteNo?: number) => {
  const asked = answerRequests(() =>
    answer === 'fails' ? refusal(503, 'unavailable', 'Several studies are being computed.') : ok(answer),
  );
  render(
    <QueryClientProvider client={new QueryClient()}>
      <MemoryRouter initialEntries={['/?unit=ms']}>
        <UnitsProvider personId="p">
          <Drivers at={at} {...(siteNo !== undefined && { siteNo })} />
        </UnitsProvider>
      </MemoryRouter>
    </QueryClientProvider>,
  );
  return asked;
};
const workOut = () => userEvent.click(screen.getByRole('button', { name: 'Work it out' }));

describe('the ranges of the drivers', () => {
  it('gather what was tried of a setting, the widest way from zero first', () => {
    const ranges = driverRanges(ROWS);
    expect(ranges.map(({ choice }) => choice)).toEqual(['ringWidth', 'regime', 'mesovortices', 'anchor']);
    expect(ranges[0]).toMatchObject({ gustMs: [-1.3, 1.6], grossMinor: [-1_500_000_000, 2_000_000_000] });
    // One of two values moves something, so the setting does.
    expect(ranges[3]).toMatchObject({ gustMs: [-0.4, 0], reason: null });
  });

  it('put those without effect last, with their reason, and name what dominates', () => {
    const reason = 'The mesovortices are off.';
    const idle = ROWS.map((one) => (one.choice === 'mesovortices' ? one : { ...one, reason }));
    expect(driverRanges(idle).map(({ choice }) => choice)[0]).toBe('mesovortices');
    expect(dominantWords(driverRanges(idle))).toBeNull();
    expect(dominantWords(driverRanges(ROWS))).toBe(
      'Most depends on ring width over radius of maximum wind, then on amplitude regime.',
    );
  });
});

describe('what drives a result', () => {
  it('asks nothing before somebody wants it, and says what isn’t covered all the same', async () => {
    const asked = show(REPLY);
    expect(asked).toHaveLength(0);
    expect(screen.getByText(/tornado-scale vortices and jets in the boundary layer/)).toBeVisible();
    expect(screen.getByText(/uncertain by a factor of 2 either way/)).toBeVisible();
    await workOut();
    const list = await screen.findByRole('list', { name: 'What each setting of the ring does' });
    expect(asked.map(({ path }) => path)).toEqual([`/runs/${at.runId}/scenarios/${at.runScenarioId}/drivers`]);
    const [width, regime, off] = within(list).getAllByRole('listitem');
    expect(width).toHaveTextContent('in use: 0.35; tried: 0.25 (raises it), 0.45 (lowers it)');
    expect(width).toHaveTextContent('judged, not measured');
    expect(width).toHaveTextContent('− 1.3 to + 1.6');
    expect(width).toHaveTextContent('Gross, USD million− 15.0 to + 20.0');
    expect(regime).toHaveTextContent('+ 2.4');
    expect(off).not.toHaveTextContent('judged');
    expect(screen.getByText(/The 200 sites with the largest gross, of 604/)).toBeVisible();
    expect(screen.queryByRole('button', { name: 'Work it out' })).toBeNull();
  });

  it('asks for one site in its drawer', async () => {
    const asked = show(REPLY, 7);
    await workOut();
    await screen.findByText(/Most depends on ring width/);
    expect(asked[0]!.path).toBe(`/runs/${at.runId}/scenarios/${at.runScenarioId}/sites/7/drivers`);
  });

  it('says what went wrong and lets try again', async () => {
    const asked = show('fails');
    await workOut();
    expect(await screen.findByText('This wasn’t worked out')).toBeVisible();
    await userEvent.click(screen.getByRole('button', { name: 'Try again' }));
    expect(asked).toHaveLength(2);
  });

  it('says why the ring does nothing where the vortices are off', async () => {
    const reason = 'The mesovortices are off.';
    show({ ...REPLY, rows: ROWS.slice(0, 1).map((one) => ({ ...one, reason })) });
    await workOut();
    expect(await screen.findByText(reason)).toBeVisible();
    expect(screen.queryByText(/Most depends/)).toBeNull();
  });
});
