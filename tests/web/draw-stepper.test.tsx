import { render, screen, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { useState } from 'react';
import { describe, expect, it } from 'vitest';
import type { Draws, DrawSites } from '#contract/draws.ts';
import { DrawStepper } from '../../web/features/results/components/draw-stepper.tsx';
import { chanceWords, gustsInDraw, sitesByGust } from '../../web/features/results/draw-sites.ts';
import { offeredGusts, readMapView } from '../../web/features/results/map-view.ts';
import type { MapSites } from '../../web/ui/map/map-data.ts';

// Three draws in the order of their loss: numbers 30, 7 and 264.
const draws: Draws = {
  currency: 'USD',
  gustThresholdsMs: [40, 50],
  draws: [30, 7, 264].map((draw, index) => ({
    draw,
    rank: index + 1,
    grossMinor: 100 * (index + 1),
    weight: 1 / 3,
    strongestMs: 60 + index,
    sitesAbove: [10, index],
    strength: 0.34,
    phaseDeg: 7.5,
  })),
  named: { p5: 30, p50: 7, p95: 264 },
  reason: null,
  notices: [],
};

function Stepping() {
  const [draw, setDraw] = useState(7);
  return (
    <>
      <output>{draw}</output>
      <input aria-label="Find" />
      <DrawStepper draws={draws} draw={draw} onDraw={setDraw} />
    </>
  );
}
const at = () => screen.getAllByRole('status').find((element) => element.tagName === 'OUTPUT')!.textContent;
const button = (name: RegExp) => screen.getByRole('button', { name });

describe('the stepper', () => {
  it('goes by the order of event loss and says where it is', async () => {
    render(<Stepping />);
    const group = screen.getByRole('group', { name: 'Draws in the order of event loss' });
    expect(within(group).getByRole('status')).toHaveTextContent('Rank 2 of 3');
    await userEvent.click(button(/next larger/));
    expect(at()).toBe('264');
    await userEvent.click(button(/next smaller/));
    await userEvent.click(button(/next smaller/));
    expect(at()).toBe('30');
    expect(within(group).getByRole('status')).toHaveTextContent('Rank 1 of 3');
  });

  it('stops at the ends, still to be reached by key', async () => {
    render(<Stepping />);
    await userEvent.click(button(/next larger/));
    expect(button(/next larger/)).toHaveAttribute('aria-disabled', 'true');
    await userEvent.click(button(/next larger/));
    expect(at()).toBe('264');
    button(/next larger/).focus();
    expect(button(/next larger/)).toHaveFocus();
  });

  it('jumps to the draws at 5, 50 and 95 % of the loss', async () => {
    render(<Stepping />);
    await userEvent.click(button(/Draw at 95 %/));
    expect(at()).toBe('264');
    expect(button(/Draw at 95 %/)).toHaveAttribute('aria-pressed', 'true');
    await userEvent.click(button(/Draw at 5 %/));
    expect(at()).toBe('30');
  });

  it('steps by [ and ], but not while somebody types', async () => {
    render(<Stepping />);
    await userEvent.keyboard(']');
    expect(at()).toBe('264');
    await userEvent.keyboard('[[');
    expect(at()).toBe('7');
    await userEvent.click(screen.getByLabelText('Find'));
    await userEvent.keyboard(']');
    expect(at()).toBe('7');
  });
});

const sites: MapSites = {
  siteNo: [1, 2, 3, 4],
  ref: ['S-1', 'S-2', 'S-3', 'S-4'],
  longitude: [-85, -85, -85, -85],
  latitude: [30, 30, 30, 30],
  tivMinor: [1, 1, 1, 1],
  state: ['ready', 'ready', 'notes', 'ready'],
  plainMs: [50, 44, 19, null],
  p5Ms: [51, 44, 19, null],
  p95Ms: [58, 44, 19, null],
};
const inDraw: DrawSites = { draw: 7, siteNo: [1], gustMs: [56], reason: null, notices: [] };

describe('sites in a draw', () => {
  it('are plain where the draw changes nothing', () => {
    const gusts = gustsInDraw(sites, inDraw);
    expect(gusts).toEqual([56, 44, 19, null]);
    // 44 in the bin from 40, 56 in the bin from 55; below 20 in none.
    expect(sitesByGust(gusts)).toEqual([0, 0, 0, 0, 1, 0, 0, 1, 0, 0, 0, 0, 0, 0]);
    expect(sitesByGust([99])).toEqual([...new Array<number>(13).fill(0), 1]);
  });

  it('say by their range how likely a gust is over the draws', () => {
    expect(chanceWords(sites, 0, 50)).toBe('95 % or more');
    expect(chanceWords(sites, 0, 55)).toBe('5–95 %');
    expect(chanceWords(sites, 0, 60)).toBe('5 % or less');
    expect(chanceWords(sites, 3, 50)).toBe('not scored');
  });
});

describe('the view in the address', () => {
  const read = (text: string, vortices = true) =>
    readMapView(new URLSearchParams(text), { vortices, defaultGustMs: 50 });
  it('is read with its draw and its gust', () => {
    expect(read('view=draw&draw=117')).toEqual({ view: 'draw', draw: 117, gustMs: 50 });
    expect(read('view=chance&gust=42.5')).toEqual({ view: 'chance', draw: null, gustMs: 42.5 });
    expect(read('view=p99')).toMatchObject({ view: 'p99' });
  });
  it('is the usual one where it can mean nothing', () => {
    expect(read('')).toEqual({ view: 'p50', draw: null, gustMs: 50 });
    expect(read('view=sideways&draw=265&gust=500')).toEqual({ view: 'p50', draw: null, gustMs: 50 });
    expect(read('view=draw&draw=1.5')).toMatchObject({ view: 'draw', draw: null });
  });
  it('is plain where the layer is off', () => {
    expect(read('view=draw&draw=5', false)).toMatchObject({ view: 'plain' });
  });
  it('offers the steps of the scale and the run’s own gusts', () => {
    expect(offeredGusts([42.5, 50], 50)).toEqual([20, 25, 30, 35, 40, 42.5, 45, 50, 55, 60, 65, 70, 75, 80, 85]);
  });
});
