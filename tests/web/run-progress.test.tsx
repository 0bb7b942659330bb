import { QueryClient, QueryClientProvider } from '@tanstack/react-query';
import { act, render, screen, waitFor } from '@testing-library/react';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { useQuery } from '@tanstack/react-query';
import { runQuery } from '../../web/features/results/result-queries.ts';
import { useRunProgress, withProgress } from '../../web/features/results/run-progress.ts';
import { answerRequests, ok } from '../helpers/web-answers.ts';
import { testRun, testScenario } from '../helpers/web-run.ts';

const working = testRun({
  state: 'working',
  scenariosDone: 0,
  chargedMinor: null,
  finishedAt: null,
  scenarios: [testScenario({ state: 'scoring', sitesDone: 10, result: null })],
});
const [scenario] = working.scenarios;

class FakeEventSource extends EventTarget {
  static readonly CLOSED = 2;
  static opened: FakeEventSource[] = [];
  readyState = 0;
  constructor(readonly url: string) {
    super();
    FakeEventSource.opened.push(this);
  }
  close() {
    this.readyState = 2;
  }
  say(data: unknown) {
    this.dispatchEvent(new MessageEvent('message', { data: JSON.stringify(data) }));
  }
}

const event = (sitesDone: number, state: 'scoring' | 'stored' = 'scoring') => ({
  runId: working.id,
  state: state === 'stored' ? ('complete' as const) : ('working' as const),
  scenarios: [{ id: scenario!.id, state, sitesDone, sitesTotal: 250 }],
});

function Screen() {
  const { data: run } = useQuery({ ...runQuery(working.id), staleTime: Infinity });
  const { live } = useRunProgress(working.id, run?.state ?? 'working');
  return (
    <p>
      {run?.state}, {run?.scenarios[0]?.sitesDone} sites, {live ? 'live' : 'polling'}
    </p>
  );
}
const show = () => {
  const client = new QueryClient({ defaultOptions: { queries: { retry: false } } });
  client.setQueryData(runQuery(working.id).queryKey, working);
  render(
    <QueryClientProvider client={client}>
      <Screen />
    </QueryClientProvider>,
  );
};

beforeEach(() => {
  FakeEventSource.opened = [];
  vi.stubGlobal('EventSource', FakeEventSource);
});
afterEach(() => vi.useRealTimers());

describe('a run under way', () => {
  it('writes pushed progress without asking again, and reads the run once a track is stored', async () => {
    const asked = answerRequests(() => ok(testRun()));
    show();
    const source = FakeEventSource.opened[0]!;
    expect(source.url).toBe(`/api/v1/runs/${working.id}/events`);
    act(() => source.say(event(120)));
    await screen.findByText('working, 120 sites, live');
    expect(asked).toHaveLength(0);
    act(() => source.say(event(250, 'stored')));
    await screen.findByText('complete, 250 sites, live');
    await waitFor(() => expect(asked.map(({ path }) => path)).toEqual([`/runs/${working.id}`]));
    expect(source.readyState).toBe(FakeEventSource.CLOSED);
  });

  it('asks every few seconds while events are down, and stops once they are back', async () => {
    vi.useFakeTimers({ toFake: ['setInterval', 'clearInterval'] });
    let sitesDone = 20;
    const asked = answerRequests(() => ok({ ...working, scenarios: [{ ...scenario!, sitesDone: (sitesDone += 10) }] }));
    show();
    const source = FakeEventSource.opened[0]!;
    act(() => void source.dispatchEvent(new Event('error')));
    await screen.findByText('working, 30 sites, polling');
    act(() => void vi.advanceTimersByTime(3000));
    await screen.findByText('working, 40 sites, polling');
    act(() => void source.dispatchEvent(new Event('open')));
    await screen.findByText('working, 40 sites, live');
    act(() => void vi.advanceTimersByTime(9000));
    expect(asked).toHaveLength(2);
  });

  it('counts finished tracks from the event', () => {
    expect(withProgress(working, event(250, 'stored'))).toMatchObject({ state: 'complete', scenariosDone: 1 });
  });
});
