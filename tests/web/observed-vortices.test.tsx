import { useState } from 'react';
import { render, screen, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { expect, it } from 'vitest';
import type { VortexObservation } from '#contract/observed-vortices.ts';
import { ObservedVortices } from '../../web/features/scenarios/components/observed-vortices.tsx';
import { draftOf, trackOf } from '../../web/features/scenarios/track-draft.ts';
import { bearingsIn } from '../../web/features/scenarios/vortex-form.ts';

let latest: readonly VortexObservation[] = [];
function Section({ readOnly = false, first = [] }: { readOnly?: boolean; first?: VortexObservation[] }) {
  const [vortices, setVortices] = useState<readonly VortexObservation[]>(first);
  latest = vortices;
  return (
    <ObservedVortices
      vortices={vortices}
      firstTime="2031-09-01T06:00:00.000Z"
      readOnly={readOnly}
      onChange={setVortices}
    />
  );
}

it('takes maxima as bearings by keyboard, shows them on the compass, and gives the focus back', async () => {
  const user = userEvent.setup();
  render(<Section />);
  await user.tab();
  await user.keyboard('{Enter}');
  expect(screen.getByLabelText('Time, UTC')).toHaveValue('2031-09-01 06:00');
  expect(screen.getByRole('img', { name: 'Compass: no marks yet' })).toBeInTheDocument();
  await user.type(screen.getByLabelText('Bearings from the centre'), '20');
  await user.keyboard('{Enter}');
  expect(screen.getByLabelText('Bearings from the centre')).toHaveAccessibleDescription(/2 to 8 bearings/);
  await user.type(screen.getByLabelText('Bearings from the centre'), ', 110° 200;290');
  expect(screen.getByRole('img', { name: 'Compass with marks at 20°, 110°, 200°, 290°' })).toBeInTheDocument();
  await user.keyboard('{Enter}');
  expect(latest).toEqual([
    { kind: 'maxima', time: '2031-09-01T06:00:00.000Z', azimuthsDeg: [20, 110, 200, 290], uncertaintyDeg: 10 },
  ]);
  expect(screen.getByText(/4 maxima at 20°, 110°, 200°, 290°/)).toBeInTheDocument();
  expect(screen.getByRole('button', { name: 'Add an observation' })).toHaveFocus();
  await user.click(screen.getByRole('button', { name: 'Remove observation 1' }));
  expect(latest).toEqual([]);
});

it('takes an ellipse in kilometres and minutes, and refuses a short axis above the long one', async () => {
  const user = userEvent.setup();
  render(<Section />);
  await user.click(screen.getByRole('button', { name: 'Add an observation' }));
  await user.selectOptions(screen.getByLabelText('Seen'), 'ellipse');
  await user.type(screen.getByLabelText('Bearing of the long axis'), '40');
  await user.type(screen.getByLabelText('Long semi-axis'), '30');
  await user.type(screen.getByLabelText('Short semi-axis'), '35');
  await user.type(screen.getByLabelText('Time of a whole turn'), '144');
  await user.click(screen.getByRole('button', { name: 'Add it to the track' }));
  expect(screen.getByLabelText('Short semi-axis')).toHaveAccessibleDescription(/not more than the long one/);
  await user.clear(screen.getByLabelText('Short semi-axis'));
  await user.type(screen.getByLabelText('Short semi-axis'), '20');
  expect(screen.getByRole('img', { name: 'Compass with marks at 40°, 220°' })).toBeInTheDocument();
  await user.click(screen.getByRole('button', { name: 'Add it to the track' }));
  expect(latest).toEqual([
    {
      kind: 'ellipse',
      time: '2031-09-01T06:00:00.000Z',
      longAxisBearingDeg: 40,
      majorM: 30_000,
      minorM: 20_000,
      rotationPeriodMinutes: 144,
      uncertaintyDeg: 10,
    },
  ]);
});

it('can be read but not changed by others, and left with Escape', async () => {
  const user = userEvent.setup();
  const { unmount } = render(<Section readOnly />);
  expect(screen.getByText('Nothing was entered.')).toBeInTheDocument();
  expect(screen.queryByRole('button')).toBeNull();
  unmount();
  render(<Section />);
  await user.click(screen.getByRole('button', { name: 'Add an observation' }));
  const form = screen.getByRole('form', { name: 'Observation of vortices' });
  await user.click(within(form).getByLabelText('Uncertainty'));
  await user.keyboard('{Escape}');
  expect(screen.queryByRole('form')).toBeNull();
  expect(latest).toEqual([]);
});

it('reads bearings however they are parted, and sends none where there are none', () => {
  expect(bearingsIn(' 20,110; 200° 290 ')).toEqual([20, 110, 200, 290]);
  expect(bearingsIn('north')).toEqual([NaN]);
  const fix = { time: '2031-09-01T06:00:00.000Z', latitude: 20, longitude: -60 };
  const track = { fixes: [fix as never], declarations: { windAveragingS: 60 as const, source: '', asOf: null } };
  expect(trackOf(draftOf(track))).toEqual(track);
});
