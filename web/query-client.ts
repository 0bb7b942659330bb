import { QueryClient } from '@tanstack/react-query';
import { ApiError } from './api/api-error.ts';

const MAX_RETRIES = 2;

/** Only silence is worth a second try; a refusal stays one. */
const retry = (failures: number, error: Error) =>
  failures < MAX_RETRIES && error instanceof ApiError && error.code === 'unavailable';

export const queryClient = new QueryClient({
  defaultOptions: { queries: { staleTime: 15_000, retry, refetchOnWindowFocus: true } },
});
