import {
  infiniteQueryOptions,
  keepPreviousData,
  queryOptions,
  useMutation,
  useQueryClient,
} from '@tanstack/react-query';
import type { z } from 'zod';
import {
  createScenario,
  getScenario,
  listScenarios,
  readTrack,
  resolveTrack,
  saveVersion,
  type NewScenario,
  type NewVersion,
  type ReadTrack,
  type Track,
} from '#contract/scenarios.ts';
import { call } from '../../api/call.ts';

const PAGE = 50;

export const scenariosQuery = () =>
  infiniteQueryOptions({
    queryKey: ['scenarios', 'list'],
    queryFn: ({ pageParam, signal }) => call(listScenarios, { query: { limit: PAGE, cursor: pageParam }, signal }),
    initialPageParam: undefined as string | undefined,
    getNextPageParam: (page) => page.nextCursor ?? undefined,
  });

export const scenarioQuery = (scenarioId: string) =>
  queryOptions({
    queryKey: ['scenarios', 'one', scenarioId],
    queryFn: ({ signal }) => call(getScenario, { params: { scenarioId }, signal }),
    // A track under edit must not change below the person; a save by someone else shows when saving.
    refetchOnWindowFocus: false,
  });

/** What the service fills in and finds odd; the last answer stays while the next one is on its way. */
export const resolutionQuery = (track: Track | null, sortByTime: boolean) =>
  queryOptions({
    queryKey: ['scenarios', 'resolution', track, sortByTime],
    queryFn: ({ signal }) => call(resolveTrack, { body: { track: track!, sortByTime }, signal }),
    enabled: track !== null,
    placeholderData: keepPreviousData,
    staleTime: Infinity,
    gcTime: 60_000,
  });

export const useReadTrack = () =>
  useMutation({ mutationFn: (body: z.input<typeof ReadTrack>) => call(readTrack, { body }) });

export function useCreateScenario() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: ({ body, key }: { body: z.input<typeof NewScenario>; key: string }) =>
      call(createScenario, { body, idempotencyKey: key }),
    onSuccess: (version) => {
      client.setQueryData(scenarioQuery(version.scenarioId).queryKey, version);
      return client.invalidateQueries({ queryKey: ['scenarios', 'list'] });
    },
  });
}

export function useSaveVersion(scenarioId: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: ({ body, key }: { body: z.input<typeof NewVersion>; key: string }) =>
      call(saveVersion, { params: { scenarioId }, body, idempotencyKey: key }),
    onSuccess: (version) => {
      client.setQueryData(scenarioQuery(scenarioId).queryKey, version);
      return client.invalidateQueries({ queryKey: ['scenarios', 'list'] });
    },
  });
}
