import { keepPreviousData, queryOptions } from '@tanstack/react-query';
import { spread, windField, type ChainSettings } from '#contract/studies.ts';
import { call } from '../../api/call.ts';

const KEEP_MS = 30 * 60_000;

export interface SpreadQuestion {
  scenarioId: string;
  version: number;
  editionId: string | null;
  settings: ChainSettings;
  /** Nothing is worked out before somebody asks. */
  asked: boolean;
}

/** One answer an edition and base; a newer version of the track leaves it standing, to be marked as stale. */
export const spreadQuery = ({ scenarioId, version, editionId, settings, asked }: SpreadQuestion) =>
  queryOptions({
    queryKey: ['scenarios', 'spread', scenarioId, editionId, settings],
    queryFn: ({ signal }) =>
      call(spread, { params: { scenarioId }, body: { version, editionId: editionId!, settings }, signal }),
    enabled: asked && editionId !== null,
    placeholderData: asked ? keepPreviousData : undefined,
    staleTime: Infinity,
    gcTime: KEEP_MS,
    refetchOnWindowFocus: false,
    retry: false,
  });

export interface FieldQuestion {
  scenarioId: string;
  version: number;
  time: string;
  settings: ChainSettings;
  halfWidthM: number;
}

/** The last picture stays while the next one is on its way. */
export const windFieldQuery = ({ scenarioId, ...body }: FieldQuestion, wanted = true) =>
  queryOptions({
    queryKey: ['scenarios', 'wind-field', scenarioId, body],
    queryFn: ({ signal }) => call(windField, { params: { scenarioId }, body, signal }),
    enabled: wanted,
    placeholderData: keepPreviousData,
    staleTime: Infinity,
    gcTime: 5 * 60_000,
    refetchOnWindowFocus: false,
  });
