import { keepPreviousData, queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import { previewVariants, saveVariants, type VariantsRequest } from '#contract/variants.ts';
import { call } from '../../api/call.ts';

/** The last answer stays while the next one is on its way. */
export const variantsQuery = (scenarioId: string, body: VariantsRequest | null) =>
  queryOptions({
    queryKey: ['scenarios', 'variants', scenarioId, body],
    queryFn: ({ signal }) => call(previewVariants, { params: { scenarioId }, body: body!, signal }),
    enabled: body !== null,
    placeholderData: body === null ? undefined : keepPreviousData,
    staleTime: Infinity,
    gcTime: 5 * 60_000,
    refetchOnWindowFocus: false,
    retry: false,
  });

export function useSaveVariants(scenarioId: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: ({ body, key }: { body: VariantsRequest; key: string }) =>
      call(saveVariants, { params: { scenarioId }, body, idempotencyKey: key }),
    // The names shown in a preview are taken now.
    onSuccess: () =>
      Promise.all([
        client.invalidateQueries({ queryKey: ['scenarios', 'list'] }),
        client.invalidateQueries({ queryKey: ['scenarios', 'variants', scenarioId] }),
      ]),
  });
}
