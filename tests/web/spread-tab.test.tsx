import { QueryClient, QueryClientProvider } from '@tanstack/react-query';
import { render, screen, waitFor, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { useState } from 'react';
import { MemoryRouter } from 'react-router-dom';
import { describe, expect, it } from 'vitest';
import type { ChainSettings, SpreadReply } from '#contract/studies.ts';
import { DEFAULT_SETTINGS, readSettings, writeSettings } from '../../web/features/studies/chain-settings.ts';
import { SpreadTab, type SpreadEdition } from '../../web/features/studies/components/spread-tab.tsx';
import { spreadCsv } from '../../web/features/studies/spread-file.ts';
import { UnitsProvider } from '../../web/lib/units.tsx';
import { answerRequests, ok, refusal } from '../helpers/web-answers.ts';
import { testSpread } from '../helpers/web-studies.ts';

const ONE: SpreadEdition = { editionId: '00000000-0000-4000-8000-000000000051', name: 'Quay, edition 1', sites: 358 };
const scenario = { scenarioId: '00000000-0000-4000-8000-000000000041', name: 'Ilvane', number: 3 };

function Held({ editions, number }: { editions: readonly SpreadEdition[]; number: number }) {
  const [settings, setSettings] = useState<ChainSettings>(DEFAULT_SETTINGS);
  return (
    <SpreadTab
      scenario={{ ...scenario, number }}
      editions={editions}
      editionId={editions[0]?.editionId ?? null}
      onEdition={() => undefined}
      settings={settings}
      onSettings={setSettings}
    />
  );
}

const show = (reply: SpreadReply | 'fails', { editions = [ONE], number = 3, unit = 'ms' } = {}) => {
  const asked = answerRequests(({ body }) =>
    reply === 'fails'
      ? refusal(503, 'unavailable', 'Another spread runs just now.')
      : ok({ ...reply, settings: (body as { settings: ChainSettings }).settings }),
  );
  render(
    <QueryClientProvider client={new QueryClient({ defaultOptions: { queries: { retry: false } } })}>
      <MemoryRouter initialEntries={[`/?unit=${unit}`]}>
        <UnitsProvider personId="p">
          <Held editions={editions} number={number} />
        </UnitsProvider>
      </MemoryRouter>
    </QueryClientProvider>,
  );
  return asked;
};
const run = () => userEvent.click(screen.getByRole('button', { name: 'Run the spread' }));
const rows = () => within(screen.getByRole('table', { name: /What each setting does/ })).getAllByRole('row');

describe('the spread of the settings', () => {
  it('asks nothing before somebody runs it, then shows the widest first with its sign', async () => {
    const asked = show(testSpread());
    expect(asked).toHaveLength(0);
    await run();
    await screen.findByText('Gross with every default');
    expect(asked[0]).toMatchObject({ path: `/scenarios/${scenario.scenarioId}/spread`, body: { version: 3 } });
    expect(screen.getByText('USD 142–318 million')).toBeVisible();
    expect(screen.getByText('66.4–71.4 m/s')).toBeVisible();
    const [, first, second] = rows();
    expect(within(first!).getByText('+ 13.4')).toBeVisible();
    expect(within(first!).getByText('+ 116')).toBeVisible();
    expect(within(second!).getByText('− 22')).toBeVisible();
  });

  it('says why a setting does nothing here, below those that do', async () => {
    show(testSpread());
    await run();
    await screen.findByText('No effect here, or not computed: 1 setting');
    expect(rows().at(-1)).toHaveTextContent('The track gives every radius of maximum wind.');
  });

  it('shows both maxima, how far they lie apart and why', async () => {
    show(testSpread(), { unit: 'kt' });
    await run();
    const card = await screen.findByRole('region', { name: 'Intensity source' });
    // 59.9 and 72.0 m/s × 3600/1852.
    expect(card).toHaveTextContent('116.4 kt');
    expect(card).toHaveTextContent('140.0 kt');
    expect(card).toHaveTextContent('23.5 kt apart.');
    expect(card).toHaveTextContent('Shape 2.10 for the reported wind against 1.60 from the relation');
    expect(card).toHaveTextContent('default, used');
  });

  it('moves along the rows by arrows and takes the other value by space, as a draft', async () => {
    const asked = show(testSpread());
    await run();
    const first = await screen.findByRole('button', { name: 'Try Reported wind for Intensity from' });
    first.focus();
    await userEvent.keyboard('{ArrowDown}');
    expect(screen.getByRole('button', { name: /190 kt/ })).toHaveFocus();
    await userEvent.keyboard(' ');
    expect(asked).toHaveLength(1);
    await userEvent.keyboard('{ArrowUp} ');
    await screen.findByText('1 setting changed, as a draft.');
    await waitFor(() => expect(asked).toHaveLength(2));
    expect(asked[1]!.body).toMatchObject({ settings: { intensity: 'wind' } });
    await screen.findByText('Gross with 1 of the settings changed');
    await userEvent.click(screen.getByRole('button', { name: 'Back to every default' }));
    await screen.findByText('Gross with every default');
    expect(asked).toHaveLength(2);
  });

  it('says that a result is that of an older version', async () => {
    const reply = testSpread();
    show({ ...reply, scenario: { ...reply.scenario, version: 2 } });
    await run();
    await screen.findByText('Made on version 2; version 3 is saved.');
    expect(screen.getByRole('button', { name: 'Run the spread again' })).toBeVisible();
  });

  it('teaches what to do without an edition, without sites in reach, and after a failure', async () => {
    show(testSpread(), { editions: [] });
    expect(screen.getByRole('link', { name: 'To Portfolios' })).toHaveAttribute('href', '/portfolios');
  });
  it('says that nothing is in reach', async () => {
    show(testSpread({ sites: { used: 0, of: 358, rule: '' } }));
    await run();
    await screen.findByText(/None of the 358 sites lies within 1,000 km/);
  });
  it('says what failed and offers another try', async () => {
    show('fails');
    await run();
    await screen.findByText('Another spread runs just now.');
    expect(screen.getByRole('button', { name: 'Try again' })).toBeVisible();
  });

  it('has the same in figures', async () => {
    show(testSpread());
    await run();
    await userEvent.click(await screen.findByRole('button', { name: 'Table' }));
    const table = screen.getByRole('table', { name: /Results with each setting/ });
    expect(within(table).getAllByRole('row')).toHaveLength(5);
    expect(within(table).getByText('The track gives every radius of maximum wind.')).toBeVisible();
  });
});

describe('the spread as a file', () => {
  it('has a line for the base and one a switch, each with the cautions', () => {
    const lines = spreadCsv(testSpread()).split('\r\n');
    expect(lines).toHaveLength(5);
    expect(lines[0]).toContain('peak_gust_change_m_s');
    expect(lines[0]).toContain('gross_change_usd');
    expect(lines[2]).toContain('Intensity from,Pressure,Reported wind');
    expect(lines[2]).toContain(',13.400,');
    expect(lines[2]).toContain(',116000000.00,');
    for (const line of lines.slice(1)) expect(line).toContain('A chosen spread, not a forecast cone.');
  });
});

describe('settings in an address', () => {
  it('come back as they were written, and what is unknown stays at its default', () => {
    const settings = readSettings([
      'profile.holland-2010',
      'averaging.at-sea-0.93',
      'mesovortices.off',
      'profile.none',
    ]);
    expect(settings).toMatchObject({
      mesovortices: false,
      wind: { profile: 'holland-2010', averaging: 'at-sea-0.93', inflow: 'phadke' },
    });
    expect(readSettings(writeSettings(settings))).toEqual(settings);
    expect(readSettings(['nonsense', 'inflow.steep', '.'])).toEqual(DEFAULT_SETTINGS);
    expect(writeSettings(DEFAULT_SETTINGS)).toEqual([]);
  });
});
