import { useEffect, useState } from 'react';
import { useQueryClient, type QueryClient } from '@tanstack/react-query';
import { watchRun, type Run, type RunEvent, type RunState } from '#contract/runs.ts';
import { watch } from '../../api/call.ts';
import { runQuery } from './result-queries.ts';

const POLL_MS = 3000;

export const isUnderWay = (state: RunState): boolean => state === 'waiting' || state === 'working';

/** The run with an event's progress written into it. */
export const withProgress = (run: Run, event: RunEvent): Run => {
  const states = new Map(event.scenarios.map((scenario) => [scenario.id, scenario]));
  const scenarios = run.scenarios.map((scenario) => ({ ...scenario, ...states.get(scenario.id) }));
  return {
    ...run,
    state: event.state,
    scenarios,
    scenariosDone: scenarios.filter(({ state }) => state === 'stored').length,
  };
};

/** True when the event says something that only the run itself can tell in full: a result, an end. */
const needsReading = (run: Run, event: RunEvent): boolean =>
  run.state !== event.state ||
  event.scenarios.some((now) => {
    const before = run.scenarios.find(({ id }) => id === now.id);
    return before?.state !== now.state && ['stored', 'failed', 'cancelled'].includes(now.state);
  });

const take = (client: QueryClient, event: RunEvent) => {
  const { queryKey } = runQuery(event.runId);
  const run = client.getQueryData(queryKey);
  if (!run) return;
  client.setQueryData(queryKey, withProgress(run, event));
  if (needsReading(run, event)) void client.invalidateQueries({ queryKey, exact: true });
  if (!isUnderWay(event.state)) {
    void client.invalidateQueries({ queryKey: ['runs', 'list'] });
    void client.invalidateQueries({ queryKey: ['runs', 'recent'] });
    void client.invalidateQueries({ queryKey: ['billing'] });
  }
};

export interface Liveness {
  live: boolean;
  /** When events were last heard. */
  lastHeard: Date | null;
}

/** Follows a run while it works: pushed events, and asking every few seconds whenever they drop. */
export function useRunProgress(runId: string, state: RunState): Liveness {
  const client = useQueryClient();
  const [liveness, setLiveness] = useState<Liveness>({ live: true, lastHeard: null });
  const underWay = isUnderWay(state);

  useEffect(() => {
    if (!underWay) return;
    return watch(
      watchRun,
      { runId },
      {
        onEvent: (event) => {
          setLiveness({ live: true, lastHeard: new Date() });
          take(client, event);
        },
        onLive: (live) => setLiveness((before) => ({ ...before, live })),
      },
    );
  }, [client, runId, underWay]);

  const polls = underWay && !liveness.live;
  useEffect(() => {
    if (!polls) return;
    const ask = () => void client.invalidateQueries({ queryKey: runQuery(runId).queryKey, exact: true });
    ask();
    const timer = setInterval(ask, POLL_MS);
    return () => clearInterval(timer);
  }, [client, runId, polls]);

  return liveness;
}
