import { infiniteQueryOptions, queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import type { z } from 'zod';
import {
  createPortfolio,
  getPortfolio,
  listPortfolios,
  uploadFile,
  type NewPortfolio,
  type Portfolio,
} from '#contract/portfolios.ts';
import { call, upload } from '../../api/call.ts';
import { editionQuery } from './edition-queries.ts';

const PAGE = 50;

export const portfoliosQuery = () =>
  infiniteQueryOptions({
    queryKey: ['portfolios', 'list'],
    queryFn: ({ pageParam, signal }) => call(listPortfolios, { query: { limit: PAGE, cursor: pageParam }, signal }),
    initialPageParam: undefined as string | undefined,
    getNextPageParam: (page) => page.nextCursor ?? undefined,
  });

export const portfolioQuery = (portfolioId: string) =>
  queryOptions({
    queryKey: ['portfolios', 'one', portfolioId],
    queryFn: ({ signal }) => call(getPortfolio, { params: { portfolioId }, signal }),
  });

export function useCreatePortfolio() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: ({ body, key }: { body: z.input<typeof NewPortfolio>; key: string }) =>
      call(createPortfolio, { body, idempotencyKey: key }),
    onSuccess: () => client.invalidateQueries({ queryKey: ['portfolios'] }),
  });
}

interface FileToSend {
  portfolio: Pick<Portfolio, 'id'>;
  file: File;
  onProgress: (sent: number, total: number) => void;
  signal: AbortSignal;
}

export function useUploadFile() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: ({ portfolio, file, onProgress, signal }: FileToSend) =>
      upload(uploadFile, { params: { portfolioId: portfolio.id }, file, onProgress, signal }),
    onSuccess: (edition) => {
      client.setQueryData(editionQuery(edition.id).queryKey, edition);
      return client.invalidateQueries({ queryKey: ['portfolios'] });
    },
  });
}
