import type { ErrorRequestHandler, RequestHandler } from 'express';
import type { Logger } from 'pino';
import type { ErrorCode } from '#contract/errors.ts';
import { AppError } from '../errors.ts';
import { toProblem } from './problem.ts';

/** What Express and its parsers throw, in our words. Their own messages may name files of the server. */
const BODY_FAULTS: Record<string, [ErrorCode, string]> = {
  'entity.parse.failed': ['malformed_request', 'The body isn’t valid JSON.'],
  'entity.too.large': ['file_too_large', 'The request is larger than this address takes.'],
  'encoding.unsupported': ['malformed_request', 'The body’s encoding isn’t supported; send UTF-8.'],
  'charset.unsupported': ['malformed_request', 'The body’s character set isn’t supported; send UTF-8.'],
  'request.size.invalid': ['malformed_request', 'The body is shorter or longer than announced.'],
  'request.aborted': ['malformed_request', 'The request ended before its body did.'],
};

const fromMiddleware = (error: unknown): AppError | null => {
  if (typeof error !== 'object' || error === null) return null;
  const { type, status, code } = error as { type?: string; status?: number; code?: string };
  if (code === 'LIMIT_FILE_SIZE')
    return new AppError('file_too_large', 'The file is larger than this address takes. Split it and upload the parts.');
  if (code?.startsWith('LIMIT_')) return new AppError('invalid_request', 'Send one file in the field “file”.');
  const known = type === undefined ? undefined : BODY_FAULTS[type];
  if (known) return new AppError(known[0], known[1], { cause: error });
  if (error instanceof URIError || (status !== undefined && status >= 400 && status < 500))
    return new AppError(status === 404 ? 'not_found' : 'malformed_request', 'The request couldn’t be read.', {
      cause: error,
    });
  return null;
};

/** The database is away, restarting or has no connection free: nothing was done, and a moment later it may be. */
const AWAY = new Set(['ECONNREFUSED', 'ECONNRESET', '57P01', '57P02', '57P03', '53300']);
const AWAY_S = 5;
const fromDatabase = (error: unknown): AppError | null => {
  if (!(error instanceof Error)) return null;
  const { code } = error as { code?: unknown };
  const isAway =
    (typeof code === 'string' && AWAY.has(code)) ||
    error.name === 'KnexTimeoutError' ||
    error.message.startsWith('Connection terminated');
  if (!isAway) return null;
  return new AppError('unavailable', 'The service can’t reach its database just now. Wait a moment and try again.', {
    cause: error,
    retryAfterS: AWAY_S,
  });
};

/** PostgreSQL holds no zero byte, in text (22021) or in JSON (22P05); no pattern of the contract rules one out. */
const ZERO_BYTE = new Set(['22021', '22P05']);
const fromText = (error: unknown): AppError | null =>
  error instanceof Error && ZERO_BYTE.has(String((error as { code?: unknown }).code))
    ? new AppError(
        'invalid_request',
        'A text in the request holds a character that can’t be stored, such as a zero byte. Take it out and send the request again.',
        { cause: error },
      )
    : null;

/** Nothing answered at this address. */
export const noSuchAddress: RequestHandler = () => {
  throw new AppError('not_found', 'There is nothing at this address.');
};

/** The one place where errors become replies: problem details for what a caller can act on, `internal` for defects. */
export const errorHandler =
  (log: Logger): ErrorRequestHandler =>
  (error: unknown, req, res, _next) => {
    const known = error instanceof AppError ? error : (fromMiddleware(error) ?? fromDatabase(error) ?? fromText(error));
    const requestId = req.requestId ?? '';
    if (!known || known.code === 'unavailable')
      log.error({ err: error, requestId, method: req.method, path: req.path }, 'request failed');
    if (res.headersSent) {
      // A reply already under way can only be cut off, so that nobody takes half of it for the whole.
      res.destroy();
      return;
    }
    const problem = known
      ? toProblem(known.code, known.message, requestId, known.faults)
      : toProblem(
          'internal',
          `The request couldn’t be carried out. Try again; if it stays, tell us the number ${requestId}.`,
          requestId,
        );
    if (known?.retryAfterS != null) res.set('Retry-After', String(Math.ceil(known.retryAfterS)));
    res.removeHeader('Content-Disposition');
    res.status(problem.status).type('application/problem+json').send(JSON.stringify(problem));
  };
