import { isRouteErrorResponse } from 'react-router-dom';
import { ApiError } from '../api/api-error.ts';

interface DescribedError {
  title: string;
  detail: string;
  requestId: string;
  canRetry: boolean;
}

/** What went wrong, in words for the person in front of it. */
export const describeError = (error: unknown): DescribedError => {
  if (error instanceof ApiError) {
    const notFound = error.code === 'not_found';
    return {
      title: notFound ? 'Not here' : error.problem.title,
      detail: notFound
        ? 'There is no such page in your organisation. It may have been removed, or the link is from another organisation.'
        : error.message,
      requestId: error.requestId,
      canRetry: !['not_found', 'not_allowed'].includes(error.code),
    };
  }
  if (isRouteErrorResponse(error) && error.status === 404)
    return {
      title: 'Not here',
      detail: 'This address leads nowhere. Check it, or start from Home.',
      requestId: '',
      canRetry: false,
    };
  return {
    title: 'This page stopped',
    detail:
      'Something on our side broke while drawing this page. Your data is unchanged. Try again, or start from Home.',
    requestId: '',
    canRetry: true,
  };
};
