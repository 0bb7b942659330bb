import { infiniteQueryOptions, queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import type { z } from 'zod';
import { listCalibrations, listCurveSets } from '#contract/models.ts';
import { listPortfolios } from '#contract/portfolios.ts';
import { acceptQuote, createQuote, getQuote, listRuns, type QuoteRequest } from '#contract/runs.ts';
import { getScenario, listScenarios } from '#contract/scenarios.ts';
import { call } from '../../api/call.ts';

const CHOICES = 200;
const PAGE = 50;
const WORKING_POLL_MS = 4000;

export const runsQuery = () =>
  infiniteQueryOptions({
    queryKey: ['runs', 'list'],
    queryFn: ({ pageParam, signal }) => call(listRuns, { query: { limit: PAGE, cursor: pageParam }, signal }),
    initialPageParam: undefined as string | undefined,
    getNextPageParam: (page) => page.nextCursor ?? undefined,
    refetchInterval: ({ state }) =>
      state.data?.pages.some((page) => page.items.some((run) => run.state === 'waiting' || run.state === 'working'))
        ? WORKING_POLL_MS
        : false,
  });

/** What a run can be put together from. */
export const editionChoicesQuery = () =>
  queryOptions({
    queryKey: ['portfolios', 'choices'],
    queryFn: ({ signal }) => call(listPortfolios, { query: { limit: CHOICES }, signal }),
  });
export const scenarioChoicesQuery = () =>
  queryOptions({
    queryKey: ['scenarios', 'choices'],
    queryFn: ({ signal }) => call(listScenarios, { query: { limit: CHOICES }, signal }),
  });
export const calibrationsQuery = () =>
  queryOptions({ queryKey: ['calibrations'], queryFn: ({ signal }) => call(listCalibrations, { signal }) });
export const curveSetsQuery = () =>
  queryOptions({ queryKey: ['curve-sets'], queryFn: ({ signal }) => call(listCurveSets, { signal }) });
export const scenarioDetailQuery = (scenarioId: string | null) =>
  queryOptions({
    queryKey: ['scenarios', 'one', scenarioId],
    queryFn: ({ signal }) => call(getScenario, { params: { scenarioId: scenarioId! }, signal }),
    enabled: scenarioId !== null,
  });

export const quoteQuery = (quoteId: string) =>
  queryOptions({
    queryKey: ['runs', 'quote', quoteId],
    queryFn: ({ signal }) => call(getQuote, { params: { quoteId }, signal }),
  });

export function useCreateQuote() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: z.input<typeof QuoteRequest>) => call(createQuote, { body }),
    onSuccess: (quote) => client.setQueryData(quoteQuery(quote.id).queryKey, quote),
  });
}

export function useAcceptQuote() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: ({ quoteId, key }: { quoteId: string; key: string }) =>
      call(acceptQuote, { params: { quoteId }, idempotencyKey: key }),
    onSuccess: (run) => {
      client.setQueryData(['runs', 'one', run.id], run);
      void client.invalidateQueries({ queryKey: ['runs', 'list'] });
      void client.invalidateQueries({ queryKey: ['runs', 'recent'] });
      void client.invalidateQueries({ queryKey: ['billing'] });
    },
  });
}
