import type { z } from 'zod';
import type { ErrorCode, Fault, Problem } from '#contract/errors.ts';

const TITLES: Record<ErrorCode, { status: number; title: string }> = {
  malformed_request: { status: 400, title: 'The request can’t be read' },
  invalid_request: { status: 422, title: 'Something in the request isn’t right' },
  not_signed_in: { status: 401, title: 'Not signed in' },
  wrong_sign_in: { status: 401, title: 'Wrong e-mail address or password' },
  too_many_requests: { status: 429, title: 'Too many requests' },
  csrf_mismatch: { status: 403, title: 'The page is out of date' },
  not_found: { status: 404, title: 'Not found' },
  not_allowed: { status: 403, title: 'Not allowed' },
  acceptance_required: { status: 403, title: 'Standing notes not accepted' },
  conflict: { status: 409, title: 'In conflict with what is stored' },
  idempotency_key_missing: { status: 400, title: 'Idempotency-Key missing' },
  idempotency_key_reused: { status: 422, title: 'Idempotency-Key used for something else' },
  file_too_large: { status: 413, title: 'File too large' },
  file_unreadable: { status: 422, title: 'File can’t be read' },
  track_unreadable: { status: 422, title: 'Track can’t be read' },
  edition_sealed: { status: 409, title: 'The edition is sealed' },
  edition_not_sealed: { status: 409, title: 'The edition isn’t sealed' },
  edition_not_ready: { status: 409, title: 'The edition isn’t ready' },
  seal_blocked: { status: 409, title: 'The edition can’t be sealed yet' },
  quote_expired: { status: 409, title: 'The quote has expired' },
  quote_used: { status: 409, title: 'The quote was already accepted' },
  balance_too_low: { status: 402, title: 'The balance is too low' },
  calibration_not_signed: { status: 409, title: 'The calibration isn’t signed' },
  pair_unlike: { status: 409, title: 'The pair can’t be compared' },
  run_finished: { status: 409, title: 'The run is finished' },
  result_not_ready: { status: 409, title: 'The result isn’t ready' },
  payment_declined: { status: 402, title: 'Payment declined' },
  payment_unavailable: { status: 503, title: 'Payments can’t be reached' },
  webhook_signature: { status: 400, title: 'Signature doesn’t hold' },
  unavailable: { status: 503, title: 'Can’t answer just now' },
  internal: { status: 500, title: 'Something went wrong on our side' },
};

export const statusOf = (code: ErrorCode): number => TITLES[code].status;

export const toProblem = (code: ErrorCode, detail: string, requestId: string, faults: Fault[] = []): Problem => ({
  type: `urn:gustloom:problem:${code}`,
  title: TITLES[code].title,
  status: TITLES[code].status,
  detail,
  code,
  requestId,
  faults,
});

const KINDS: Record<string, string> = {
  string: 'text',
  number: 'a number',
  int: 'a whole number',
  boolean: 'true or false',
  array: 'a list',
  object: 'an object',
  record: 'an object',
};
const FORMATS: Record<string, string> = {
  uuid: 'an id',
  email: 'an e-mail address',
  datetime: 'a time such as 2026-12-01T12:00:00.000Z',
  date: 'a day such as 2026-12-01',
  url: 'an address that starts with https://',
};

const SIZES: Record<string, (amount: unknown) => string> = {
  string: (amount) => `${String(amount)} characters`,
  array: (amount) => `${String(amount)} entries`,
};

/** Zod's complaints in words for the person who wrote the value; messages written in the contract win over these. */
const wordsFor: z.core.$ZodErrorMap = (issue) => {
  switch (issue.code) {
    case 'invalid_type':
      return issue.input === undefined
        ? 'This is missing.'
        : `This must be ${KINDS[issue.expected] ?? issue.expected}.`;
    case 'invalid_format':
      return `This must be ${FORMATS[issue.format] ?? `written as ${issue.format}`}.`;
    case 'too_small':
    case 'too_big': {
      const small = issue.code === 'too_small';
      const bound = small ? issue.minimum : issue.maximum;
      const amount = (SIZES[issue.origin] ?? String)(bound);
      return small ? `This must be at least ${amount}.` : `This must be at most ${amount}.`;
    }
    case 'invalid_value':
      return `This must be one of: ${issue.values.map(String).join(', ')}.`;
    case 'unrecognized_keys':
      return `This isn’t known here: ${issue.keys.join(', ')}.`;
    case 'invalid_union':
      return 'This has none of the forms allowed here.';
    default:
      return undefined;
  }
};

/** Parses a part of a request; every fault is listed with its place. */
export const parsePart = (
  part: 'params' | 'query' | 'body',
  schema: z.ZodType,
  given: unknown,
): { value: unknown; faults: Fault[] } => {
  const read = schema.safeParse(given, { error: wordsFor });
  if (read.success) return { value: read.data, faults: [] };
  return {
    value: undefined,
    faults: read.error.issues.map(({ path, message }) => ({ path: [part, ...path.map(String)].join('.'), message })),
  };
};
