import { infiniteQueryOptions, queryOptions, useMutation } from '@tanstack/react-query';
import { createTopUp, getBalance, getTopUp, listCharges, listMovements } from '#contract/billing.ts';
import { call } from '../../api/call.ts';

const PAGE = 25;
const PENDING_POLL_MS = 2000;

export const balanceQuery = () =>
  queryOptions({ queryKey: ['billing', 'balance'], queryFn: ({ signal }) => call(getBalance, { signal }) });

export const chargesQuery = () =>
  infiniteQueryOptions({
    queryKey: ['billing', 'charges'],
    queryFn: ({ pageParam, signal }) => call(listCharges, { query: { limit: PAGE, cursor: pageParam }, signal }),
    initialPageParam: undefined as string | undefined,
    getNextPageParam: (page) => page.nextCursor ?? undefined,
  });

export const movementsQuery = () =>
  infiniteQueryOptions({
    queryKey: ['billing', 'movements'],
    queryFn: ({ pageParam, signal }) => call(listMovements, { query: { limit: PAGE, cursor: pageParam }, signal }),
    initialPageParam: undefined as string | undefined,
    getNextPageParam: (page) => page.nextCursor ?? undefined,
  });

/** Coming back from the provider proves nothing: the state follows its signed message, so it is asked until it moves. */
export const topUpQuery = (topUpId: string) =>
  queryOptions({
    queryKey: ['billing', 'top-up', topUpId],
    queryFn: ({ signal }) => call(getTopUp, { params: { topUpId }, signal }),
    refetchInterval: ({ state }) => (state.data?.state === 'pending' ? PENDING_POLL_MS : false),
  });

export const useCreateTopUp = () =>
  useMutation({
    mutationFn: ({ amountMinor, key }: { amountMinor: number; key: string }) =>
      call(createTopUp, { body: { amountMinor }, idempotencyKey: key }),
  });
