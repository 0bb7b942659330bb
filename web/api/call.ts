import type { z } from 'zod';
import type { Endpoint } from '#contract/endpoint.ts';
import { refreshSession, Session, signOut } from '#contract/session.ts';
import { errorFrom, unexpected, unreachable } from './api-error.ts';
import { newIdempotencyKey } from './idempotency-key.ts';

const BASE = '/api/v1';

type Input<S> = S extends z.ZodType ? z.input<S> : undefined;
/** Present exactly when the endpoint has such a part; optional when the part is undefined. */
type Part<Name extends string, S> =
  undefined extends Input<S> ? { [K in Name]?: undefined } : { [K in Name]: Input<S> };

type Options<E extends Endpoint> = Part<'params', NonNullable<E['params']>> & {
  query?: Partial<Record<string, string | number | boolean | undefined>> & Partial<Input<NonNullable<E['query']>>>;
  body?: Input<NonNullable<E['body']>>;
  /** For an action that must happen once: keep it over retries of the same intent. */
  idempotencyKey?: string;
  signal?: AbortSignal;
};
type Reply<E extends Endpoint> = z.output<E['response']>;

let csrfToken = '';
let signedOut: () => void = () => undefined;
/** Known to be over, and said: until the next session, further refusals say nothing new. */
let isOver = false;
/** What to do, once, when the session is over and can't be renewed. */
export const whenSignedOut = (listener: () => void): void => {
  signedOut = listener;
};

/** The address of an endpoint, for links and downloads. */
export const addressOf = (endpoint: Endpoint, parts: { params?: unknown; query?: unknown } = {}): string => {
  const params = (parts.params ?? {}) as Record<string, unknown>;
  const path = endpoint.path.replace(/:(\w+)/g, (_, name: string) => encodeURIComponent(String(params[name])));
  const search = new URLSearchParams();
  for (const [key, value] of Object.entries((parts.query ?? {}) as Record<string, unknown>))
    if (value !== undefined && value !== null && value !== '') search.set(key, String(value));
  return `${BASE}${path}${search.size === 0 ? '' : `?${search.toString()}`}`;
};

interface Answer {
  status: number;
  json: unknown;
}

const isAbort = (error: unknown) => error instanceof DOMException && error.name === 'AbortError';

const readJson = (status: number, text: string): unknown => {
  if (text === '') return null;
  try {
    return JSON.parse(text);
  } catch (cause) {
    throw unexpected(status, cause);
  }
};

const headersFor = (endpoint: Endpoint, idempotencyKey: string | undefined): Record<string, string> => ({
  Accept: 'application/json',
  ...(endpoint.method !== 'get' && csrfToken && { 'X-CSRF-Token': csrfToken }),
  ...(endpoint.idempotent && { 'Idempotency-Key': idempotencyKey ?? newIdempotencyKey() }),
});

const send = async (endpoint: Endpoint, address: string, options: SendOptions): Promise<Answer> => {
  try {
    const response = await fetch(address, {
      method: endpoint.method.toUpperCase(),
      credentials: 'same-origin',
      headers: {
        ...headersFor(endpoint, options.idempotencyKey),
        ...(options.body !== undefined && { 'Content-Type': 'application/json' }),
      },
      body: options.body === undefined ? undefined : JSON.stringify(options.body),
      signal: options.signal,
    });
    return { status: response.status, json: readJson(response.status, await response.text()) };
  } catch (cause) {
    if (isAbort(cause) || !(cause instanceof TypeError)) throw cause;
    throw unreachable(cause);
  }
};
interface SendOptions {
  body?: unknown;
  idempotencyKey?: string;
  signal?: AbortSignal;
}

const parse = <E extends Endpoint>(endpoint: E, { status, json }: Answer): Reply<E> => {
  if (status < 200 || status >= 300) throw errorFrom(status, json);
  const reply = endpoint.response.safeParse(json);
  if (!reply.success) throw unexpected(status, reply.error);
  if (endpoint.response === Session) {
    csrfToken = (reply.data as Session).csrfToken;
    isOver = false;
  }
  // Whoever signs out knows.
  if (endpoint.id === signOut.id) isOver = true;
  return reply.data as Reply<E>;
};

let renewal: Promise<boolean> | null = null;
/** One renewal at a time, however many requests found the session stale together. */
const renew = (): Promise<boolean> => {
  renewal ??= send(refreshSession, addressOf(refreshSession), {})
    .then((answer) => {
      parse(refreshSession, answer);
      return true;
    })
    .catch(() => false)
    .finally(() => {
      renewal = null;
    });
  return renewal;
};

const withRenewal = async (endpoint: Endpoint, attempt: () => Promise<Answer>): Promise<Answer> => {
  const first = await attempt();
  if (first.status !== 401 || endpoint.access === 'public') return first;
  if (await renew()) return attempt();
  if (!isOver) {
    isOver = true;
    signedOut();
  }
  return first;
};

/** Calls an endpoint of the contract and returns its parsed reply, or throws an ApiError. */
export const call = async <E extends Endpoint>(
  endpoint: E,
  ...[options]: undefined extends Part<'params', NonNullable<E['params']>>['params'] ? [Options<E>?] : [Options<E>]
): Promise<Reply<E>> => {
  const {
    params,
    query,
    body,
    idempotencyKey = newIdempotencyKey(),
    signal,
  } = (options ?? {}) as {
    params?: unknown;
    query?: unknown;
  } & SendOptions;
  const address = addressOf(endpoint, { params, query });
  return parse(endpoint, await withRenewal(endpoint, () => send(endpoint, address, { body, idempotencyKey, signal })));
};

interface UploadOptions<E extends Endpoint> {
  params: Input<NonNullable<E['params']>>;
  file: File;
  onProgress?: (sentBytes: number, totalBytes: number) => void;
  signal?: AbortSignal;
}

const sendFile = (
  endpoint: Endpoint,
  address: string,
  { file, onProgress, signal }: Omit<UploadOptions<Endpoint>, 'params'>,
) =>
  new Promise<Answer>((resolve, reject) => {
    // fetch has no upload progress.
    const request = new XMLHttpRequest();
    request.open(endpoint.method.toUpperCase(), address);
    for (const [name, value] of Object.entries(headersFor(endpoint, undefined))) request.setRequestHeader(name, value);
    request.upload.addEventListener('progress', ({ loaded, total }) =>
      onProgress?.(Math.min(loaded, file.size), Math.min(total, file.size) || file.size),
    );
    request.addEventListener('load', () => {
      try {
        resolve({ status: request.status, json: readJson(request.status, request.responseText) });
      } catch (cause) {
        reject(cause);
      }
    });
    request.addEventListener('error', () => reject(unreachable(null)));
    request.addEventListener('abort', () => reject(new DOMException('Cancelled', 'AbortError')));
    signal?.addEventListener('abort', () => request.abort(), { once: true });
    const form = new FormData();
    form.set('file', file);
    request.send(form);
  });

/** Sends a file as form data, with progress in bytes. */
export const upload = async <E extends Endpoint>(endpoint: E, options: UploadOptions<E>): Promise<Reply<E>> => {
  const address = addressOf(endpoint, { params: options.params });
  return parse(endpoint, await withRenewal(endpoint, () => sendFile(endpoint, address, options)));
};

const REOPEN_MS = 3000;

/** Follows an endpoint's server-sent events until closed; `onLive(false)` says that events dropped meanwhile. */
export const watch = <E extends Endpoint>(
  endpoint: E,
  params: Input<NonNullable<E['params']>>,
  listeners: { onEvent: (event: Reply<E>) => void; onLive?: (live: boolean) => void },
): (() => void) => {
  let source: EventSource;
  let reopening: ReturnType<typeof setTimeout> | undefined;
  const open = () => {
    source = new EventSource(addressOf(endpoint, { params }));
    source.addEventListener('open', () => listeners.onLive?.(true));
    source.addEventListener('message', ({ data }: MessageEvent<string>) => {
      const event = endpoint.response.safeParse(JSON.parse(data));
      if (event.success) listeners.onEvent(event.data as Reply<E>);
    });
    source.addEventListener('error', () => {
      listeners.onLive?.(false);
      // The browser reconnects by itself except after a refusal, for example when the session had to be renewed.
      if (source.readyState === EventSource.CLOSED) reopening = setTimeout(() => void renew().then(open), REOPEN_MS);
    });
  };
  open();
  return () => {
    clearTimeout(reopening);
    source.close();
  };
};
