import { readFileSync } from 'node:fs';
import { QueryClient, QueryClientProvider } from '@tanstack/react-query';
import { render, screen, waitFor, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import axe from 'axe-core';
import { MemoryRouter } from 'react-router-dom';
import { describe, expect, it } from 'vitest';
import { Validation } from '#contract/validation.ts';
import { validationCsv } from '../../web/features/validation/validation-file.ts';
import { Component as ValidationPage } from '../../web/pages/validation.tsx';
import { FrameContext } from '../../web/ui/frame/frame-context.ts';
import { UnitsProvider } from '../../web/lib/units.tsx';
import { answerRequests, ok, refusal } from '../helpers/web-answers.ts';

const published = Validation.parse(JSON.parse(readFileSync('api/features/validation/hindcast.json', 'utf8')));
const scored = published.observations.filter(({ role }) => role === 'P');

const show = (unit = 'ms') =>
  render(
    <QueryClientProvider client={new QueryClient({ defaultOptions: { queries: { retry: false } } })}>
      <MemoryRouter initialEntries={[`/validation?unit=${unit}`]}>
        <UnitsProvider personId="p">
          <FrameContext value={{ readOnlyChip: null }}>
            <ValidationPage />
          </FrameContext>
        </UnitsProvider>
      </MemoryRouter>
    </QueryClientProvider>,
  );
const stations = () => screen.getByRole('table', { name: 'Stations with observed and modelled gusts' });

describe('the validation page', () => {
  it('waits in words, then says both settings with their ranges', async () => {
    answerRequests(() => ok(published));
    show();
    expect(screen.getByRole('status', { name: 'Reading the comparison' })).toBeVisible();
    const all = published.errors.find(({ group, settings }) => group === 'all' && settings === 'default')!;
    const pressure = await screen.findByRole('region', { name: 'Errors by pressure' });
    expect(within(pressure).getByText(`central + ${(100 * all.bias.value).toFixed(1)} %`)).toBeVisible();
    expect(screen.getByRole('region', { name: 'Errors by wind' })).toBeVisible();
    expect(screen.getByText('The enhanced band isn’t a prediction interval.')).toBeVisible();
    expect(screen.getByText(/No wind record validates the mesovortex enhancement/)).toBeVisible();
  });

  it('says what failed, and reads again', async () => {
    let answer = refusal(500, 'internal', 'Something went wrong on our side.');
    answerRequests(() => answer);
    show();
    const alert = await screen.findByRole('alert');
    expect(alert).toHaveTextContent('The comparison wasn’t read');
    expect(alert).toHaveTextContent('req-1');
    answer = ok(published);
    await userEvent.click(within(alert).getByRole('button', { name: 'Try again' }));
    await waitFor(() => expect(stations()).toBeVisible());
  });

  it('lists the scored stations first and every one when asked, lower bounds as such', async () => {
    answerRequests(() => ok(published));
    show();
    await screen.findByRole('region', { name: 'Errors by pressure' });
    // A station has a row of figures and a row of words; above them stands the header.
    expect(within(stations()).getAllByRole('row')).toHaveLength(1 + 2 * scored.length);
    await userEvent.click(screen.getByRole('radio', { name: `All ${published.observations.length}` }));
    expect(within(stations()).getAllByRole('row')).toHaveLength(1 + 2 * published.observations.length);
    expect(within(stations()).getAllByText(/^≥ /).length).toBe(
      published.observations.filter(({ role }) => role === 'L').length,
    );
    expect(within(stations()).getAllByText(/Wind recalled, not read/).length).toBeGreaterThan(0);
  });

  it('has the picture as a table, in the chosen unit', async () => {
    answerRequests(() => ok(published));
    show('kt');
    const chart = await screen.findByRole('region', { name: 'Modelled against observed' });
    expect(within(chart).getByRole('img')).toHaveAccessibleName(/by pressure, plain: \d+ of 25 within 10 %/);
    await userEvent.click(screen.getByRole('radio', { name: 'Enhanced' }));
    await userEvent.click(within(chart).getByRole('button', { name: 'Table' }));
    const table = within(chart).getByRole('table');
    expect(within(table).getByRole('columnheader', { name: 'Observed, kt' })).toBeVisible();
    // 1 kt = 1852 m / 3600 s.
    const knots = ((scored[0]!.modelled.default.p50Ms * 3600) / 1852).toFixed(1);
    expect(within(within(table).getAllByRole('row')[1]!).getByText(knots)).toBeVisible();
  });

  it('has no finding of axe-core, every station shown', async () => {
    answerRequests(() => ok(published));
    const { container } = show();
    await userEvent.click(await screen.findByRole('radio', { name: `All ${published.observations.length}` }));
    // jsdom paints nothing, so contrast can’t be judged here.
    const { violations } = await axe.run(container, { rules: { 'color-contrast': { enabled: false } } });
    expect(violations.map(({ id, nodes }) => [id, nodes[0]!.html])).toEqual([]);
  });

  it('weighs storms alike when asked', async () => {
    answerRequests(() => ok(published));
    show();
    const table = await screen.findByRole('table', { name: 'Errors of the scored peaks by setting' });
    const before = table.textContent;
    await userEvent.click(screen.getByRole('radio', { name: 'Each storm alike' }));
    expect(table.textContent).not.toBe(before);
  });
});

it('the file has a line for each station, with the cautions in each', () => {
  const lines = validationCsv(published).split('\r\n');
  expect(lines).toHaveLength(1 + published.observations.length);
  for (const line of lines.slice(1)) expect(line).toContain('isn’t a prediction interval');
  expect(lines[0]).toContain('gust_10_m_3_s_m_s');
});
