import { QueryClient, QueryClientProvider } from '@tanstack/react-query';
import { fireEvent, render, screen, waitFor, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { useState } from 'react';
import { MemoryRouter } from 'react-router-dom';
import { describe, expect, it, vi } from 'vitest';
import type { ChainSettings } from '#contract/studies.ts';
import { DEFAULT_SETTINGS } from '../../web/features/studies/chain-settings.ts';
import { WindFieldTab } from '../../web/features/studies/components/wind-field-tab.tsx';
import { trackTimes } from '../../web/features/studies/track-times.ts';
import { UnitsProvider } from '../../web/lib/units.tsx';
import { bearingOf, sideOf, windAt } from '../../web/ui/charts/field-grid.ts';
import { profileAt } from '../../web/ui/charts/radial-profile.tsx';
import { answerRequests, ok } from '../helpers/web-answers.ts';
import { testField, testScenario } from '../helpers/web-studies.ts';

interface Body {
  time: string;
  settings: ChainSettings;
}

function Held({ onTime }: { onTime: (time: string) => void }) {
  const [settings, setSettings] = useState<ChainSettings>(DEFAULT_SETTINGS);
  const [time, setTime] = useState<string | null>(null);
  return (
    <WindFieldTab
      version={testScenario()}
      time={time}
      onTime={(next) => {
        setTime(next);
        onTime(next);
      }}
      settings={settings}
      onSettings={setSettings}
    />
  );
}

const show = () => {
  // Nothing is drawn without a layout; the numbers are what is tested here.
  vi.spyOn(HTMLCanvasElement.prototype, 'getContext').mockReturnValue(null);
  const asked = answerRequests(({ body }) => ok(testField((body as Body).time, (body as Body).settings)));
  const onTime = vi.fn();
  render(
    <QueryClientProvider client={new QueryClient({ defaultOptions: { queries: { retry: false } } })}>
      <MemoryRouter initialEntries={['/?unit=ms']}>
        <UnitsProvider personId="p">
          <Held onTime={onTime} />
        </UnitsProvider>
      </MemoryRouter>
    </QueryClientProvider>,
  );
  return { asked, onTime, times: () => asked.map(({ body }) => (body as Body).time) };
};
const picture = () => screen.findByRole('application', { name: /Every default/ });
const numbers = () => screen.getByRole('region', { name: 'Under the cursor' });

describe('the wind field', () => {
  it('opens at the strongest fix with the cursor on the strongest gust', async () => {
    const { times } = show();
    await picture();
    expect(times()).toEqual(['2026-09-03T06:00:00.000Z']);
    // The eastern edge of the first row: 20 + 10 m/s.
    expect(within(numbers()).getByRole('row', { name: /^Gust/ })).toHaveTextContent('30.0');
  });

  it('moves its cursor by key and reads the numbers out', async () => {
    show();
    const field = await picture();
    field.focus();
    await userEvent.keyboard('{Home}');
    expect(numbers()).toHaveTextContent('0 km N 0° of the centre, in it');
    expect(within(numbers()).getByRole('row', { name: /^Gust/ })).toHaveTextContent('25.0');
    await userEvent.keyboard('{ArrowRight}');
    expect(numbers()).toHaveTextContent('40 km E 90° of the centre, right');
    expect(within(numbers()).getByRole('row', { name: /^Gust/ })).toHaveTextContent('26.0');
    expect(within(numbers()).getByRole('row', { name: /^Wind from/ })).toHaveTextContent('E 90°');
    fireEvent.keyDown(field, { key: 'ArrowLeft', shiftKey: true });
    expect(numbers()).toHaveTextContent('160 km W 270° of the centre, left');
  });

  it('moves time by key: half hours by arrows, fixes by Page Up and Page Down', async () => {
    const { times, onTime } = show();
    await picture();
    const slider = screen.getByRole('slider', { name: 'Time along the track' });
    slider.focus();
    await userEvent.keyboard('{ArrowRight}');
    expect(slider).toHaveAttribute('aria-valuetext', '3 Sep 06:30 UTC');
    await waitFor(() => expect(times().at(-1)).toBe('2026-09-03T06:30:00.000Z'));
    await waitFor(() => expect(onTime).toHaveBeenLastCalledWith('2026-09-03T06:30:00.000Z'));
    await userEvent.keyboard('{PageUp}');
    expect(slider).toHaveAttribute('aria-valuetext', '3 Sep 09:00 UTC');
    await userEvent.keyboard('{PageDown}');
    expect(slider).toHaveAttribute('aria-valuetext', '3 Sep 06:00 UTC');
    await userEvent.keyboard('{Home}');
    expect(slider).toHaveAttribute('aria-valuetext', '3 Sep 00:00 UTC');
  });

  it('reads the profile at a radius chosen by key', async () => {
    show();
    await picture();
    const radius = screen.getByRole('slider', { name: 'Radius read out' });
    radius.focus();
    await userEvent.keyboard('{ArrowRight}');
    // 20 km to 50 km: 60, 48, 52 and 44 m/s × 20/50.
    expect(radius).toHaveAttribute(
      'aria-valuetext',
      '50.0 km: gradient 24.0, mean round the circle 19.2, right of the motion 20.8, left of the motion 17.6 m/s',
    );
  });

  it('stands a changed setting beside the default, with the difference', async () => {
    const { asked } = show();
    await picture();
    await userEvent.selectOptions(screen.getByLabelText('Asymmetry from motion'), 'kepert');
    await screen.findByRole('application', { name: /, B\./ });
    expect((asked.at(-1)!.body as Body).settings.wind.asymmetry).toBe('kepert');
    const row = within(screen.getByRole('region', { name: 'The storm at this time' })).getByRole('row', {
      name: /^Strongest gust/,
    });
    expect(row).toHaveTextContent('30.0');
    expect(row).toHaveTextContent('32.0');
    expect(row).toHaveTextContent('+ 2.0');
    await userEvent.click(screen.getByRole('button', { name: 'Back to default' }));
    await picture();
    expect(screen.queryByRole('application', { name: /, B\./ })).toBeNull();
  });
});

describe('numbers between the points of a field', () => {
  const grid = {
    halfWidthM: 1000,
    points: 3,
    seaWindMs: Array<number>(9).fill(10),
    directionDeg: [350, 10, 10, 350, 10, 10, 350, 10, 10],
    gustMs: [0, 1, 2, 10, 11, 12, 20, 21, 22],
  };
  it('are interpolated in both directions', () => {
    // A plane is reproduced exactly: 1 a column, 10 a row.
    expect(windAt(grid, { eastM: 250, northM: -500 }).gustMs).toBeCloseTo(16.25, 12);
  });
  it('turn the direction through north, not through south', () => {
    const { directionDeg } = windAt(grid, { eastM: -500, northM: 0 });
    expect(Math.min(directionDeg, 360 - directionDeg)).toBeLessThan(1e-9);
  });
  it('know bearing and side', () => {
    expect(bearingOf({ eastM: -1, northM: -1 })).toBeCloseTo(225, 12);
    expect(sideOf({ eastM: 1, northM: 0 }, 350)).toBe('right');
    expect(sideOf({ eastM: 0, northM: 1 }, 90)).toBe('left');
  });
  it('read a profile straight between its radii', () => {
    const profile = { radiusM: [0, 10, 30], gradientMs: [0, 20, 40], meanMs: [], rightMs: [], leftMs: [] };
    expect(profileAt(profile, 'gradientMs', 20)).toBe(30);
    expect(profileAt(profile, 'gradientMs', 99)).toBe(40);
  });
});

it('steps along a track by half hours and stops at every fix', () => {
  const { stops, fixes } = trackTimes(['2026-09-03T00:10:00.000Z', '2026-09-03T01:05:00.000Z']);
  expect(fixes).toHaveLength(2);
  expect(stops.map((stop) => new Date(stop).toISOString().slice(11, 16))).toEqual(['00:10', '00:30', '01:00', '01:05']);
});
