import { render, screen, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { useState, type ReactNode } from 'react';
import { MemoryRouter } from 'react-router-dom';
import { describe, expect, it } from 'vitest';
import type { Calibration } from '#contract/models.ts';
import { WindChoices } from '#contract/wind-choices.ts';
import { OptionsStep } from '../../web/features/runs/components/options-step.tsx';
import { DEFAULT_OPTIONS, departures, isSameRequest, type RunSetup } from '../../web/features/runs/run-setup.ts';
import { TerrainEffects } from '../../web/features/results/components/terrain-effects.tsx';
import { UnitsProvider } from '../../web/lib/units.tsx';

let options: RunSetup['options'];
function Held() {
  const [held, setHeld] = useState<RunSetup['options']>(DEFAULT_OPTIONS);
  options = held;
  return <OptionsStep options={held} onChange={setHeld} strongest={null} departures={[]} calibration={null} />;
}
const withUnits = (children: ReactNode, unit = 'ms') =>
  render(
    <MemoryRouter initialEntries={[`/?unit=${unit}`]}>
      <UnitsProvider personId="p">{children}</UnitsProvider>
    </MemoryRouter>,
  );
const open = () => userEvent.click(screen.getByRole('button', { name: /wind field choices$/ }));

describe('the amplitude regime of a run', () => {
  it('is chosen by the catalogue’s words and left out when it is the default', async () => {
    withUnits(<Held />);
    await userEvent.click(screen.getByRole('radio', { name: 'Always breaking down' }));
    expect(options.regime).toBe('breakdown');
    await userEvent.click(screen.getByRole('radio', { name: 'Mixed' }));
    expect(options).toEqual(DEFAULT_OPTIONS);
  });

  it('isn’t asked where the vortices are off', async () => {
    withUnits(<Held />);
    await userEvent.click(screen.getByRole('radio', { name: 'Plain' }));
    expect(screen.queryByText('Amplitude regime')).toBeNull();
  });

  it('departs from the calibration by name', () => {
    const calibration = { settings: { intensity: 'pressure', anchor: 'auto' } } as Calibration;
    expect(departures({ ...DEFAULT_OPTIONS, regime: 'breakdown' }, calibration)).toEqual(['amplitude regime']);
    expect(departures({ ...DEFAULT_OPTIONS, regime: 'mixed' }, calibration)).toEqual([]);
  });
});

describe('the wind field choices of a run', () => {
  it('are all default until one is confirmed, and say which one isn’t', async () => {
    withUnits(<Held />);
    expect(screen.getByText('all default')).toBeVisible();
    await open();
    await userEvent.selectOptions(screen.getByLabelText('Radial profile'), 'holland-2010');
    expect(options.wind).toBeUndefined();
    await userEvent.click(screen.getByRole('button', { name: 'Use these' }));
    expect(options.wind).toEqual(WindChoices.parse({ profile: 'holland-2010' }));
    expect(screen.getByText('1 changed')).toBeVisible();
    expect(screen.getByText('radial profile: “Holland 2010, at the surface” instead of “Holland 1980”')).toBeVisible();
  });

  it('leave nothing behind when they go back to default', async () => {
    withUnits(<Held />);
    await open();
    await userEvent.selectOptions(screen.getByLabelText('Inflow angle'), 'zhang-uhlhorn');
    await userEvent.click(screen.getByRole('button', { name: 'Use these' }));
    await open();
    await userEvent.click(screen.getByRole('button', { name: 'All default' }));
    await userEvent.click(screen.getByRole('button', { name: 'Use these' }));
    expect(options).toEqual(DEFAULT_OPTIONS);
  });

  it('make a quote another one, unless they are the defaults spelt out', () => {
    const request = {
      editionId: 'e',
      scenarioVersionIds: ['a'],
      calibrationId: 'c',
      curveSetId: 'v',
      purpose: 'exploratory' as const,
      costCentre: '',
    };
    const withWind = (wind?: WindChoices) => ({ ...request, options: { ...DEFAULT_OPTIONS, ...(wind && { wind }) } });
    expect(isSameRequest(withWind(), withWind(WindChoices.parse({})))).toBe(true);
    expect(isSameRequest(withWind(), withWind(WindChoices.parse({ fetch: 'land-all-round' })))).toBe(false);
  });
});

it('says at a site what other ground would do, in the person’s unit, from the ground that is there', () => {
  withUnits(
    <TerrainEffects
      effects={[
        { terrain: 'water_edge', roughnessM: 0.003, plainMs: 60, isPresent: false },
        { terrain: 'suburban', roughnessM: 0.3, plainMs: 50, isPresent: true },
      ]}
    />,
    'kmh',
  );
  const ground = within(screen.getByRole('region', { name: 'What the ground does' }));
  expect(ground.getByText(/suburban/)).toHaveTextContent('suburban, as here, roughness 0.300 m');
  expect(ground.getByText('180.0')).toBeVisible();
  // (60 − 50) m/s × 3.6.
  expect(ground.getByText('+ 36.0')).toBeVisible();
});
