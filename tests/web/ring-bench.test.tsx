import { QueryClient, QueryClientProvider } from '@tanstack/react-query';
import { act, configure, render, screen, waitFor, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { createMemoryRouter, Outlet, RouterProvider } from 'react-router-dom';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { RingRequest } from '#contract/rings.ts';
import { AMPLITUDE_NODES, AMPLITUDE_WEIGHTS, MEAN_AMPLITUDE } from '#engine/ring/draws.ts';
import { RingService } from '../../api/features/rings/ring-service.ts';
import { framesCsv, framesJson } from '../../web/features/rings/film-files.ts';
import type { FilmAnswer, FilmAsked, FilmFrame } from '../../web/features/rings/film.ts';
import { DRAWN_STRENGTHS, gustUnder, MEAN_STRENGTH } from '../../web/features/rings/gust-estimate.ts';
import { DEFAULT_STUDY, readStudy, writeStudy } from '../../web/features/rings/ring-study.ts';
import { SIGNED_IN_ROUTE } from '../../web/features/session/session-queries.ts';
import { UnitsProvider } from '../../web/lib/units.tsx';
import { Component as RingBench } from '../../web/pages/ring-bench.tsx';
import { answerRequests, ok, refusal, testSession } from '../helpers/web-answers.ts';

// The page asks three things of the service before it is whole; a busy machine takes its time.
configure({ asyncUtilTimeout: 10_000 });

const rings = new RingService(() => 'engine');
const frame = (timeS: number, vortices: number): FilmFrame => ({
  ...{ timeS, vortices, vorticity: new Float32Array(64 * 64).fill(0.006), maxWindMs: 57, meanMaxWindMs: 52 },
  ...{ radiusOfMeanMaxM: 30_000, minPressurePa: -2100, energyShare: 0.99, enstrophyShare: 0.9, circulationResidual: 0 },
});

/** Stands for the browser's worker: the test says when a frame comes. */
class FakeWorker {
  static all: FakeWorker[] = [];
  onmessage: ((event: { data: FilmAnswer }) => void) | null = null;
  asked: FilmAsked | null = null;
  isEnded = false;
  constructor() {
    FakeWorker.all.push(this);
  }
  postMessage(asked: FilmAsked) {
    this.asked = asked;
  }
  terminate() {
    this.isEnded = true;
  }
  answer(data: FilmAnswer) {
    act(() => this.onmessage?.({ data }));
  }
  static get last() {
    return FakeWorker.all.at(-1)!;
  }
}

const calibration = {
  ...{ id: '00000000-0000-4000-8000-000000000041', code: 'CAL-1', version: 1, state: 'signed', note: '' },
  settings: { intensity: 'pressure', anchor: 'auto', ringWidthFraction: 0.35, eyeVorticityRatio: 0.2 },
  ...{ curveSetId: '00000000-0000-4000-8000-000000000042', signedBy: 'A', signedAt: '2026-12-01T12:00:00.000Z' },
  digest: 'a'.repeat(64),
};

beforeEach(() => {
  FakeWorker.all = [];
  vi.stubGlobal('Worker', FakeWorker);
  // jsdom paints nothing; the journey looks at the picture.
  vi.spyOn(HTMLCanvasElement.prototype, 'getContext').mockReturnValue(null);
});
afterEach(() => {
  vi.unstubAllGlobals();
  vi.restoreAllMocks();
});

const open = (address = '/ring-bench', roles: ('modeler' | 'underwriter')[] = ['modeler']) => {
  const asked = answerRequests(({ path, method, body }) => {
    if (path === '/rings') return ok(rings.describe(RingRequest.parse(body)));
    if (path === '/rings/stability-map') return ok(rings.map());
    if (path === '/calibrations' && method === 'GET') return ok({ items: [calibration] });
    if (path === '/calibrations')
      return ok({ ...calibration, version: 2, state: 'draft', signedBy: null, signedAt: null }, 201);
    return refusal(404, 'not_found', 'Not here.');
  });
  const session = testSession({ roles });
  const router = createMemoryRouter(
    [
      {
        id: SIGNED_IN_ROUTE,
        loader: () => session,
        HydrateFallback: () => null,
        element: (
          <UnitsProvider personId="p">
            <Outlet />
          </UnitsProvider>
        ),
        children: [{ path: 'ring-bench', element: <RingBench /> }],
      },
    ],
    { initialEntries: [address] },
  );
  render(
    <QueryClientProvider client={new QueryClient({ defaultOptions: { queries: { retry: false } } })}>
      <RouterProvider router={router} />
    </QueryClientProvider>,
  );
  return { asked, router };
};
const facts = () => screen.findByRole('region', { name: 'What this ring does' });
const factOf = (strip: HTMLElement, name: string) => within(strip).getByText(name).parentElement;

describe('the ring bench', () => {
  it('tells the worked ring’s facts, rounded from the published formula’s numbers', async () => {
    open();
    const strip = await facts();
    for (const [name, value] of [
      ['Vortices', '4'],
      ['Growth', '31 min'],
      ['Pattern turns in', '87 min'],
      ['One passes every', '22 min'],
      ['Active at least', '125 min'],
      ['Amplitude', '0.126'],
      ['Orbit, core', '25.3, 11.4 km'],
    ] as const)
      expect(factOf(strip, name)).toHaveTextContent(value);
  });

  it('is set by keyboard, by slider and by typing, and keeps the ring in the address', async () => {
    const { asked, router } = open();
    await facts();
    screen.getByRole('slider', { name: 'Ring width' }).focus();
    await userEvent.keyboard('{ArrowLeft}');
    expect(screen.getByLabelText('Ring width, typed')).toHaveValue('0.34');
    await userEvent.keyboard('{Shift>}{ArrowLeft}{/Shift}');
    expect(screen.getByLabelText('Ring width, typed')).toHaveValue('0.30');
    const wind = screen.getByLabelText('Maximum wind, 1 min, typed');
    await userEvent.clear(wind);
    await userEvent.type(wind, '90');
    expect(wind).toBeInvalid();
    expect(wind).toHaveAccessibleDescription('Give 33 to 75.');
    await userEvent.clear(wind);
    await userEvent.type(wind, '70');
    expect(wind).toBeValid();
    await waitFor(() => expect(router.state.location.search).toContain('wind=70'));
    expect(router.state.location.search).toContain('width=0.3');
    await waitFor(() =>
      expect(asked.findLast(({ path }) => path === '/rings')?.body).toMatchObject({
        ...{ maxWindMs: 70, ringWidthFraction: 0.3, radiusOfMaxWindM: 30_000, eyeVorticityRatio: 0.2 },
      }),
    );
  });

  it('says of a stable ring that it has no vortices, and that it adds nothing to the gust', async () => {
    open('/ring-bench?width=0.45&eye=0.6');
    const strip = await facts();
    expect(within(strip).getByRole('status')).toHaveTextContent(
      'No vortices: growth below 0.02 of the average vorticity',
    );
    expect(factOf(strip, 'Growth')).toHaveTextContent('nothing grows');
    expect(screen.getByText('A stable ring adds nothing to the gust.')).toBeVisible();
  });

  it('shows the ring at once, computes the film on play, steps through it and cancels', async () => {
    open();
    await facts();
    expect(FakeWorker.last.asked).toMatchObject({
      whole: false,
      order: { points: 128, durationS: 21_600, frameStepS: 600 },
    });
    FakeWorker.last.answer({ frame: frame(0, 0) });
    expect(
      await screen.findByRole('img', { name: /Vorticity 0 min after the start, anticlockwise: no separate vortices/ }),
    ).toBeVisible();
    await userEvent.click(screen.getByRole('button', { name: 'Play' }));
    const film = FakeWorker.last;
    expect(film.asked?.whole).toBe(true);
    film.answer({ frame: frame(0, 0) });
    film.answer({ frame: frame(600, 1) });
    film.answer({ frame: frame(1200, 4) });
    await userEvent.click(await screen.findByRole('button', { name: 'Pause' }));
    screen.getByRole('button', { name: 'Step on' }).focus();
    await userEvent.keyboard('..');
    expect(screen.getByRole('img', { name: /20 min after the start.*4 vortices counted/ })).toBeVisible();
    await userEvent.keyboard(',');
    expect(screen.getByRole('img', { name: /10 min after the start.*1 vortex counted/ })).toBeVisible();
    await userEvent.click(screen.getByRole('button', { name: 'Cancel' }));
    expect(film.isEnded).toBe(true);
    expect(screen.getByText('Cancelled after 3 frames.')).toBeInTheDocument();
    await userEvent.click(screen.getByRole('radio', { name: 'south' }));
    expect(screen.getByRole('img', { name: /10 min after the start, clockwise/ })).toBeVisible();
  });

  it('drops the film of an old ring, and says what the engine refused', async () => {
    open();
    await facts();
    FakeWorker.last.answer({ frame: frame(0, 3) });
    const old = FakeWorker.last;
    screen.getByRole('slider', { name: 'Eye vorticity ratio' }).focus();
    await userEvent.keyboard('{ArrowUp}');
    await waitFor(() => expect(FakeWorker.last).not.toBe(old));
    expect(screen.queryByRole('img', { name: /3 vortices counted/ })).toBeNull();
    FakeWorker.last.answer({ refused: 'grid points is 7; use one of 64, 96' });
    expect(await screen.findByText(/grid points is 7/)).toBeVisible();
  });

  it('moves on the stability map by arrows, and reads out what is there', async () => {
    open();
    const map = await screen.findByRole('application', { name: /stability map/ });
    expect(map).toHaveAccessibleDescription(
      'Width 0.35, eye ratio 0.20: 4 vortices, growth 0.14 of the average vorticity',
    );
    map.focus();
    await userEvent.keyboard('{Shift>}{ArrowLeft}{ArrowUp}{ArrowUp}{ArrowUp}{ArrowUp}{/Shift}');
    expect(map).toHaveAccessibleDescription('Width 0.45, eye ratio 0.60: stable, no vortices');
    expect(screen.getByLabelText('Eye vorticity ratio, typed')).toHaveValue('0.60');
  });

  it('says for each wave whether the edges lock, and why the first two don’t break a ring', async () => {
    open();
    const wave = await screen.findByLabelText('Wave');
    expect(screen.getByText('Locked, grows')).toBeVisible();
    await userEvent.selectOptions(wave, '1');
    expect(screen.getByText('Not locked, neutral')).toBeVisible();
    expect(screen.getByText(/m = 1 moves a ring, it doesn’t break it/)).toBeVisible();
    await userEvent.selectOptions(wave, '2');
    expect(screen.getByText(/m = 2 never locks in a sharp ring/)).toBeVisible();
  });

  it('sends the ring to a draft with a reason; underwriters are told who can', async () => {
    const { asked } = open('/ring-bench?width=0.28');
    await facts();
    await userEvent.click(await screen.findByRole('button', { name: 'Send to CAL-1 draft' }));
    const dialog = await screen.findByRole('dialog');
    await userEvent.type(within(dialog).getByLabelText('Why this ring'), 'Radar showed it');
    await userEvent.click(within(dialog).getByRole('button', { name: 'Save draft' }));
    expect(await screen.findByText('CAL-1 version 2 is a draft')).toBeVisible();
    expect(asked.find(({ path, method }) => path === '/calibrations' && method === 'POST')?.body).toEqual({
      ...{ basedOnId: calibration.id, note: 'Radar showed it', ringWidthFraction: 0.28, eyeVorticityRatio: 0.2 },
    });
  });

  it('lets an underwriter look, and says who drafts', async () => {
    open('/ring-bench', ['underwriter']);
    await facts();
    expect(await screen.findByRole('button', { name: /Send to CAL-1 draft/ })).toHaveAccessibleDescription(
      'modelers draft calibrations',
    );
  });
});

describe('behind the bench', () => {
  it('reads an address back as it wrote it, and holds what is beyond a range', () => {
    const study = {
      ...DEFAULT_STUDY,
      radiusKm: 22.5,
      windIs: 'peak',
      hemisphere: 'south',
      points: 96,
      heatingMin: 120,
    } as const;
    const search = new URLSearchParams();
    writeStudy(study, search);
    expect(readStudy(search)).toEqual(study);
    expect(readStudy(new URLSearchParams('wind=500&width=0&eye=x&points=77'))).toEqual({
      ...{ ...DEFAULT_STUDY, maxWindMs: 75, width: 0.1 },
    });
  });

  it('estimates gusts with the strengths the engine’s own draws have', () => {
    // Weighted quantile: the first node at which the weights add up to the share.
    for (const { share, strength } of DRAWN_STRENGTHS) {
      let sum = 0;
      const node = AMPLITUDE_NODES.find((_, k) => (sum += AMPLITUDE_WEIGHTS[k]!) >= share - 1e-12);
      expect(strength).toBe(node);
    }
    expect(MEAN_STRENGTH).toBe(MEAN_AMPLITUDE);
    const ring = { maxWindMs: 60, amplitude: 0.12558 } as const;
    expect(gustUnder(0.34, { ...ring, windIs: 'mean' }).extraMs).toBeCloseTo(1.11 * 60 * 0.34 * 0.12558, 10);
    // A vortex of the mean strength brings the wind given as a peak back to itself.
    expect(gustUnder(MEAN_STRENGTH, { ...ring, windIs: 'peak' }).extraMs).toBeCloseTo(0, 10);
  });

  it('writes files that carry their caution', () => {
    const frames = [frame(0, 0), frame(600, 4)];
    const [header, first] = framesCsv(frames).split('\r\n');
    expect(header).toMatch(/^time_s,.*notice_version$/);
    expect(first!.split(',')).toHaveLength(header!.split(',').length);
    const file = JSON.parse(framesJson(ORDER, frames)) as {
      note: string;
      setup: { sideM: number };
      frames: { vorticityPerS: number[] }[];
    };
    expect(file.note).toContain('Not a forecast or a warning');
    expect(file.setup.sideM).toBe(210_000);
    expect(file.frames[1]!.vorticityPerS).toHaveLength(64 * 64);
  });
});
const ORDER = {
  ...{ maxWindMs: 60, radiusOfMaxWindM: 30_000, ringWidthFraction: 0.35, eyeVorticityRatio: 0.2, points: 64 },
  ...{ durationS: 3600, frameStepS: 600, relaxationS: null },
};
