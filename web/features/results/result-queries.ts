import { keepPreviousData, queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import type { z } from 'zod';
import {
  cancelRun,
  getResultPoints,
  getRun,
  getRunSlip,
  getSiteDetail,
  listSites,
  type SiteSort,
} from '#contract/runs.ts';
import { getDrivers, getSiteDrivers } from '#contract/drivers.ts';
import { call } from '../../api/call.ts';

const runKey = (runId: string) => ['runs', 'one', runId] as const;

export const runQuery = (runId: string) =>
  queryOptions({ queryKey: runKey(runId), queryFn: ({ signal }) => call(getRun, { params: { runId }, signal }) });

export interface ResultAddress {
  runId: string;
  runScenarioId: string;
}

export const resultKey = (at: ResultAddress) => [...runKey(at.runId), at.runScenarioId] as const;

/** Results of a finished track never change. */
export const FOREVER = { staleTime: Infinity } as const;

export const pointsQuery = (at: ResultAddress) =>
  queryOptions({
    queryKey: [...runKey(at.runId), at.runScenarioId, 'points'],
    queryFn: ({ signal }) => call(getResultPoints, { params: at, signal }),
    ...FOREVER,
  });

export interface SitesFilter {
  sort: z.output<typeof SiteSort>;
  direction: 'asc' | 'desc';
  minGustMs?: number | undefined;
  search?: string | undefined;
}

export const SITES_PAGE = 100;

export const sitesQuery = (at: ResultAddress, filter: SitesFilter, page: number) =>
  queryOptions({
    queryKey: [...runKey(at.runId), at.runScenarioId, 'sites', filter, page],
    queryFn: ({ signal }) =>
      call(listSites, {
        params: at,
        query: { ...filter, offset: page * SITES_PAGE, limit: SITES_PAGE },
        signal,
      }),
    ...FOREVER,
    ...(page === 0 && { placeholderData: keepPreviousData }),
  });

export const siteQuery = (at: ResultAddress, siteNo: number) =>
  queryOptions({
    queryKey: [...runKey(at.runId), at.runScenarioId, 'site', siteNo],
    queryFn: ({ signal }) => call(getSiteDetail, { params: { ...at, siteNo }, signal }),
    ...FOREVER,
  });

/** Of the event, or of one site; nothing is worked out before somebody asks. */
export const driversQuery = (at: ResultAddress, siteNo: number | null, asked: boolean) =>
  queryOptions({
    queryKey: [...runKey(at.runId), at.runScenarioId, 'drivers', siteNo],
    queryFn: ({ signal }) =>
      siteNo === null
        ? call(getDrivers, { params: at, signal })
        : call(getSiteDrivers, { params: { ...at, siteNo }, signal }),
    enabled: asked,
    retry: false,
    refetchOnWindowFocus: false,
    ...FOREVER,
  });

export const slipQuery = (runId: string) =>
  queryOptions({
    queryKey: [...runKey(runId), 'slip'],
    queryFn: ({ signal }) => call(getRunSlip, { params: { runId }, signal }),
  });

export function useCancelRun(runId: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: () => call(cancelRun, { params: { runId } }),
    onSuccess: (run) => {
      client.setQueryData(runQuery(runId).queryKey, run);
      void client.invalidateQueries({ queryKey: ['runs', 'list'] });
      void client.invalidateQueries({ queryKey: ['runs', 'recent'] });
      void client.invalidateQueries({ queryKey: ['billing'] });
    },
  });
}
