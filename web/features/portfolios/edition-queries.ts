import { infiniteQueryOptions, queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import type { z } from 'zod';
import {
  applyFix,
  getEdition,
  getSitePoints,
  listMessages,
  listRows,
  mapColumns,
  sealEdition,
  undoFix,
  type Edition,
  type FixRequest,
  type Mapping,
  type RowState,
  type SealRequest,
} from '#contract/portfolios.ts';
import { call } from '../../api/call.ts';

const CHECKING_POLL_MS = 800;
const ROWS = 100;

const editionKey = (editionId: string) => ['portfolios', 'edition', editionId] as const;

export const editionQuery = (editionId: string) =>
  queryOptions({
    queryKey: [...editionKey(editionId), 'head'],
    queryFn: ({ signal }) => call(getEdition, { params: { editionId }, signal }),
    // Ask for progress only while there is any.
    refetchInterval: ({ state }) => (state.data?.state === 'checking' ? CHECKING_POLL_MS : false),
  });

export const messagesQuery = (editionId: string) =>
  queryOptions({
    queryKey: [...editionKey(editionId), 'messages'],
    queryFn: ({ signal }) => call(listMessages, { params: { editionId }, signal }),
  });

export interface RowFilter {
  state?: RowState | undefined;
  code?: string | undefined;
}

export const rowsQuery = (editionId: string, filter: RowFilter) =>
  infiniteQueryOptions({
    queryKey: [...editionKey(editionId), 'rows', filter],
    queryFn: ({ pageParam, signal }) =>
      call(listRows, { params: { editionId }, query: { ...filter, cursor: pageParam, limit: ROWS }, signal }),
    initialPageParam: undefined as string | undefined,
    getNextPageParam: (page) => page.nextCursor ?? undefined,
  });

export const sitePointsQuery = (editionId: string) =>
  queryOptions({
    queryKey: [...editionKey(editionId), 'points'],
    queryFn: ({ signal }) => call(getSitePoints, { params: { editionId }, signal }),
  });

/** A change to a draft answers with the edition; everything listed below it is then asked again. */
function useEditionChange<Input>(editionId: string, change: (input: Input) => Promise<Edition>) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: change,
    onSuccess: (edition) => {
      client.setQueryData(editionQuery(editionId).queryKey, edition);
      return client.invalidateQueries({ queryKey: ['portfolios'] });
    },
  });
}

export const useMapColumns = (editionId: string) =>
  useEditionChange(editionId, (body: z.input<typeof Mapping>) => call(mapColumns, { params: { editionId }, body }));
export const useApplyFix = (editionId: string) =>
  useEditionChange(editionId, (body: z.input<typeof FixRequest>) => call(applyFix, { params: { editionId }, body }));
export const useUndoFix = (editionId: string) =>
  useEditionChange(editionId, () => call(undoFix, { params: { editionId } }));
export const useSealEdition = (editionId: string) =>
  useEditionChange(editionId, (body: z.input<typeof SealRequest>) =>
    call(sealEdition, { params: { editionId }, body }),
  );
