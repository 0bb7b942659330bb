import { queryOptions } from '@tanstack/react-query';
import { getBalance } from '#contract/billing.ts';
import { listPortfolios } from '#contract/portfolios.ts';
import { listRuns } from '#contract/runs.ts';
import { listScenarios } from '#contract/scenarios.ts';
import { call } from '../../api/call.ts';

const RECENT = 20;
const WORKING_POLL_MS = 4000;

/** The latest runs, for Home and the rail; asked again while any of them is under way. */
export const recentRunsQuery = () =>
  queryOptions({
    queryKey: ['runs', 'recent'],
    queryFn: ({ signal }) => call(listRuns, { query: { limit: RECENT }, signal }),
    refetchInterval: ({ state }) =>
      state.data?.items.some((run) => run.state === 'waiting' || run.state === 'working') ? WORKING_POLL_MS : 60_000,
  });

export const recentPortfoliosQuery = () =>
  queryOptions({
    queryKey: ['portfolios', 'recent'],
    queryFn: ({ signal }) => call(listPortfolios, { query: { limit: RECENT }, signal }),
  });

export const recentScenariosQuery = () =>
  queryOptions({
    queryKey: ['scenarios', 'recent'],
    queryFn: ({ signal }) => call(listScenarios, { query: { limit: RECENT }, signal }),
  });

export const homeBalanceQuery = () =>
  queryOptions({ queryKey: ['billing', 'balance'], queryFn: ({ signal }) => call(getBalance, { signal }) });
