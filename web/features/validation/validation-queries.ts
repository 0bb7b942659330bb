import { queryOptions } from '@tanstack/react-query';
import { getValidation } from '#contract/validation.ts';
import { call } from '../../api/call.ts';

/** Changes only with the product itself. */
export const validationQuery = () =>
  queryOptions({
    queryKey: ['validation'],
    queryFn: ({ signal }) => call(getValidation, { signal }),
    staleTime: Infinity,
  });
