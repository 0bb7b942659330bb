import { keepPreviousData, queryOptions } from '@tanstack/react-query';
import { getDrawSites, listDraws } from '#contract/draws.ts';
import { getFootprint, type FootprintView } from '#contract/runs.ts';
import { call } from '../../api/call.ts';
import { FOREVER, resultKey, type ResultAddress } from './result-queries.ts';

/** A view of the footprint, with the draw or the gust it is of. */
export interface PictureAsked {
  view: FootprintView;
  draw?: number | undefined;
  gustMs?: number | undefined;
}

export const pictureQuery = (at: ResultAddress, asked: PictureAsked) =>
  queryOptions({
    queryKey: [...resultKey(at), 'footprint', asked.view, asked.draw ?? null, asked.gustMs ?? null],
    queryFn: ({ signal }) => call(getFootprint, { params: at, query: { ...asked }, signal }),
    placeholderData: keepPreviousData,
    ...FOREVER,
  });

export const drawsQuery = (at: ResultAddress) =>
  queryOptions({
    queryKey: [...resultKey(at), 'draws'],
    queryFn: ({ signal }) => call(listDraws, { params: at, signal }),
    ...FOREVER,
  });

export const drawSitesQuery = (at: ResultAddress, draw: number) =>
  queryOptions({
    queryKey: [...resultKey(at), 'draw-sites', draw],
    queryFn: ({ signal }) => call(getDrawSites, { params: { ...at, draw }, signal }),
    placeholderData: keepPreviousData,
    ...FOREVER,
  });
