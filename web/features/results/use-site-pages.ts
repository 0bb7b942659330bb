import { useCallback, useState } from 'react';
import { keepPreviousData, useQueries, useQuery } from '@tanstack/react-query';
import type { SiteResult } from '#contract/runs.ts';
import { SITES_PAGE, sitesQuery, type ResultAddress, type SitesFilter } from './result-queries.ts';

/** Rows of a long list by their place in the server's order; only the pages in view are asked for. */
export function useSitePages(at: ResultAddress, filter: SitesFilter) {
  const first = useQuery({ ...sitesQuery(at, filter, 0), placeholderData: keepPreviousData });
  const [range, setRange] = useState<[from: number, to: number]>([0, 0]);
  const wanted = pagesIn(range).filter((page) => page > 0);
  const others = useQueries({ queries: wanted.map((page) => sitesQuery(at, filter, page)) });
  const failed = others.find(({ isError }) => isError);

  const rowAt = useCallback(
    (index: number): SiteResult | undefined => {
      const page = Math.floor(index / SITES_PAGE);
      const rows = page === 0 ? first.data?.items : others[wanted.indexOf(page)]?.data?.items;
      return rows?.[index % SITES_PAGE];
    },
    [first.data, others, wanted],
  );
  return { first, rowAt, setRange, failedPage: failed ? () => void failed.refetch() : undefined };
}

const pagesIn = ([from, to]: [number, number]): number[] => {
  const firstPage = Math.floor(from / SITES_PAGE);
  const lastPage = Math.floor(to / SITES_PAGE);
  return Array.from({ length: lastPage - firstPage + 1 }, (_, index) => firstPage + index);
};
