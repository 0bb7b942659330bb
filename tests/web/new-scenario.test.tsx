import { QueryClient, QueryClientProvider } from '@tanstack/react-query';
import { render, screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { createMemoryRouter, RouterProvider } from 'react-router-dom';
import { expect, it } from 'vitest';
import { Component as NewScenario } from '../../web/pages/new-scenario.tsx';
import { UnitsProvider } from '../../web/lib/units.tsx';
import { answerRequests, ok, refusal } from '../helpers/web-answers.ts';

const id = '00000000-0000-4000-8000-000000000031';
const fix = {
  time: '2026-09-03T06:00:00.000Z',
  latitude: 30,
  longitude: -50,
  centralPressureHpa: 940,
  ambientPressureHpa: null,
  maxWindMs: 60,
  radiusOfMaxWindM: 30_000,
  radius34KtM: null,
  radius50KtM: null,
  radius64KtM: null,
  ringWidthFraction: null,
  eyeVorticityRatio: null,
  hoursInland: null,
};
const resolution = {
  fixes: [],
  findings: [],
  path: [],
  wavenumber: null,
  hemisphere: 'north',
  maxima: { fix: 0, reportedMs: null, pressureImpliedMs: null, used: 'pressure' },
};
const version = {
  id,
  scenarioId: id,
  name: 'Varrow',
  number: 1,
  createdAt: '2026-12-01T12:00:00.000Z',
  createdBy: 'Teodor Brask',
  digest: 'a'.repeat(64),
  track: { fixes: [fix], declarations: { windAveragingS: 600, source: '', asOf: null } },
  resolution,
  derivation: null,
  stale: null,
  notices: [],
};

it('saves only once the averaging period is declared, then leaves without asking', async () => {
  const asked = answerRequests(({ path }) => {
    if (path === '/scenarios/read')
      return ok({
        format: 'track-csv',
        name: 'VARROW',
        storms: ['VARROW'],
        windAveragingS: null,
        conversions: [],
        fixes: [fix],
        findings: [],
      });
    if (path === '/scenarios/resolve') return ok(resolution);
    if (path === '/scenarios') return ok(version, 201);
    return refusal(404, 'not_found', 'Not here.');
  });
  const router = createMemoryRouter(
    [
      {
        path: '/scenarios/new',
        element: (
          <UnitsProvider personId="p">
            <NewScenario />
          </UnitsProvider>
        ),
      },
      { path: '/scenarios/:scenarioId', element: <p>The saved scenario</p> },
    ],
    { initialEntries: ['/scenarios/new'] },
  );
  render(
    <QueryClientProvider client={new QueryClient({ defaultOptions: { queries: { retry: false } } })}>
      <RouterProvider router={router} />
    </QueryClientProvider>,
  );
  await userEvent.type(screen.getByLabelText('Best-track text, or our track CSV'), 'time_utc');
  await userEvent.click(screen.getByRole('button', { name: 'Read the track' }));
  const save = await screen.findByRole('button', { name: 'Save scenario' });
  expect(save).toHaveAccessibleDescription('Declare how long the winds were averaged.');
  expect(screen.getByLabelText('Name')).toHaveValue('Varrow');
  await userEvent.selectOptions(screen.getByLabelText('Wind averaging'), '600');
  await userEvent.click(screen.getByRole('button', { name: 'Save scenario' }));
  expect(await screen.findByText('The saved scenario')).toBeVisible();
  const created = asked.find(({ path, method }) => path === '/scenarios' && method === 'POST');
  expect(created?.body).toMatchObject({ name: 'Varrow', track: { declarations: { windAveragingS: 600 } } });
});
