import { QueryClient, QueryClientProvider } from '@tanstack/react-query';
import { render, screen, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import axe from 'axe-core';
import { createMemoryRouter, RouterProvider } from 'react-router-dom';
import { describe, expect, it } from 'vitest';
import type { VariantsReply, VariantsRequest } from '#contract/variants.ts';
import { VariantsTab } from '../../web/features/scenarios/components/variants-tab.tsx';
import { shiftKm } from '../../web/features/scenarios/landfalls.ts';
import { UnitsProvider } from '../../web/lib/units.tsx';
import { answerRequests, ok, refusal, type Asked } from '../helpers/web-answers.ts';
import { testScenario } from '../helpers/web-studies.ts';

const scenario = testScenario();
const SAVED = '00000000-0000-4000-8000-000000000077';
const NO_CHANGE = { offsetKm: 0, headingDeg: 0, windFactor: 1, speedFactor: 1, radiusFactor: 1 };

/** Northward along 85° W; landfall at 30° N. */
const variantAt = (name: string, longitude: number, over: object = {}): VariantsReply['base'] => ({
  name,
  change: NO_CHANGE,
  path: [
    [longitude, 28],
    [longitude, 31],
  ],
  maxWindMs: 58,
  landfall: { time: '2026-09-03T11:00:00.000Z', latitude: 30, longitude, maxWindMs: 50 },
  scenarioId: null,
  ...over,
});
const replyTo = ({ changes, ensemble }: VariantsRequest, scenarioId: string | null): VariantsReply => ({
  base: variantAt('Ilvane', -85),
  variants: changes
    ? changes.map((change) =>
        variantAt(`Ilvane, ${change.offsetKm} km`, -85 + change.offsetKm / 96.3, { change, scenarioId }),
      )
    : Array.from({ length: ensemble!.members }, (_, i) =>
        variantAt(`Ilvane, member ${i + 1} of ${ensemble!.members}, seed ${ensemble!.seed}`, -85 + i / 10, {
          scenarioId,
          ...(i === 0 ? { landfall: null } : {}),
        }),
      ),
  notices: [{ code: 'intensity-by-time', text: 'Winds stay with their fix.', version: '1' }],
});
const answers = ({ path, body }: Asked) =>
  path.endsWith('/preview')
    ? ok(replyTo(body as VariantsRequest, null))
    : path.endsWith('/variants')
      ? ok(replyTo(body as VariantsRequest, SAVED), 201)
      : refusal(404, 'not_found', 'Not here.');

const show = (canSave = true, answer: typeof answers = answers) => {
  const asked = answerRequests(answer);
  const router = createMemoryRouter([
    {
      path: '/',
      element: (
        <UnitsProvider personId="p">
          <VariantsTab scenario={scenario} canSave={canSave} />
        </UnitsProvider>
      ),
    },
  ]);
  const { container } = render(
    <QueryClientProvider client={new QueryClient({ defaultOptions: { queries: { retry: false } } })}>
      <RouterProvider router={router} />
    </QueryClientProvider>,
  );
  return { asked, container };
};
const bodies = (asked: Asked[]) => asked.map(({ body }) => body as VariantsRequest);

describe('the variants of a track', () => {
  it('are previewed to both sides at once, and follow what is typed', async () => {
    const { asked } = show();
    expect(await screen.findByText(/^Both variants come ashore/)).toBeVisible();
    expect(screen.getByText(/chosen spread, not a forecast cone/i)).toBeVisible();
    expect(bodies(asked)[0]).toMatchObject({
      version: scenario.number,
      changes: [{ offsetKm: 40 }, { offsetKm: -40 }],
    });
    await userEvent.click(screen.getByRole('checkbox', { name: 'And as far to the other side' }));
    const wind = screen.getByLabelText('Wind');
    await userEvent.clear(wind);
    await userEvent.type(wind, '-10');
    expect(await screen.findByText(/^The variant comes ashore/)).toBeVisible();
    expect(bodies(asked).at(-1)!.changes).toEqual([{ ...NO_CHANGE, offsetKm: 40, windFactor: 0.9 }]);
  });

  it('have every landfall as numbers too', async () => {
    show();
    await screen.findByText(/^Both variants come ashore/);
    const list = screen.getByRole('table', { name: 'Variants' });
    expect(within(list).getAllByRole('row')).toHaveLength(4);
    await userEvent.click(screen.getByRole('button', { name: 'Table' }));
    const region = screen.getByRole('region', { name: /come ashore/ });
    expect(within(region).getByText('40 right')).toBeVisible();
    expect(within(region).getByText('40 left')).toBeVisible();
  });

  it('of an ensemble come from a seed, and say how many stay at sea', async () => {
    const { asked } = show();
    await userEvent.click(screen.getByRole('radio', { name: 'Ensemble' }));
    expect(await screen.findByText(/^9 of 10 variants come ashore/)).toBeVisible();
    const { ensemble } = bodies(asked).at(-1)!;
    expect(ensemble).toMatchObject({ seed: 1, members: 10, offsetKm: 40, headingDeg: 3 });
    expect(ensemble!.windLog).toBeCloseTo(Math.log(1.06), 12);
    await userEvent.click(screen.getByRole('button', { name: 'New seed' }));
    expect(screen.getByLabelText('Seed')).not.toHaveValue('1');
  });

  it('are saved as scenarios one can open', async () => {
    const { asked } = show();
    await screen.findByText(/^Both variants come ashore/);
    await userEvent.click(await screen.findByRole('button', { name: 'Save 2 variants' }));
    const saved = (await screen.findByText('2 scenarios saved')).closest('[role=alert]')!;
    const links = within(saved as HTMLElement).getAllByRole('link');
    expect(links.map((link) => link.getAttribute('href'))).toEqual([`/scenarios/${SAVED}`, `/scenarios/${SAVED}`]);
    const post = asked.find(({ path }) => path.endsWith('/variants'))!;
    expect(post.headers.get('idempotency-key')).toBeTruthy();
  });

  it('say what to correct instead of asking, and what to change when nothing is', async () => {
    const { asked } = show();
    await screen.findByText(/^Both variants come ashore/);
    const offset = screen.getByLabelText('Offset');
    await userEvent.clear(offset);
    await userEvent.type(offset, '900');
    expect(await screen.findByText('Between −500 and 500.')).toBeVisible();
    expect(await screen.findByText(/^Correct the marked field. The preview/)).toBeVisible();
    const before = asked.length;
    await userEvent.clear(offset);
    expect(await screen.findByText(/^Change something to see a variant. The/)).toBeVisible();
    expect(asked).toHaveLength(before);
  });

  it('that can’t be tracks say why; a failure can be tried again', async () => {
    show(true, () => refusal(422, 'invalid_request', 'The change leads to a track that can’t be used.'));
    expect(await screen.findByText('This can’t be a track')).toBeVisible();
    expect(screen.queryByRole('button', { name: 'Try again' })).toBeNull();
  });

  it('can be tried again after a failure, and are not saved by those who only read', async () => {
    show(false, () => refusal(503, 'unavailable', 'Too busy.'));
    expect(await screen.findByRole('button', { name: 'Try again' })).toBeVisible();
    expect(screen.queryByRole('button', { name: /^Save/ })).toBeNull();
  });

  it('have no finding of axe-core', async () => {
    const { container } = show();
    await screen.findByText(/^Both variants come ashore/);
    const { violations } = await axe.run(container, { rules: { 'color-contrast': { enabled: false } } });
    expect(violations.map(({ id, nodes }) => [id, nodes[0]?.html])).toEqual([]);
  });
});

it('measures a landfall from the central one, right of the motion positive, across 180° too', () => {
  const base = variantAt('central', 180);
  // A degree of longitude at 30° N is 111.19 km × cos 30° = 96.3 km.
  expect(shiftKm(base, variantAt('east', 181))).toBeCloseTo(96.3, 1);
  expect(shiftKm(base, variantAt('west', 179))).toBeCloseTo(-96.3, 1);
  expect(shiftKm(base, variantAt('at sea', 181, { landfall: null }))).toBeNull();
});
