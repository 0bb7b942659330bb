import { beforeEach, expect, it, vi } from 'vitest';
import { createTopUp, getBalance } from '#contract/billing.ts';
import { uploadFile } from '#contract/portfolios.ts';
import { getRun, listSites } from '#contract/runs.ts';
import { acceptNotes, getSession, signIn, signOut } from '#contract/session.ts';
import { ApiError } from '../../web/api/api-error.ts';
import { addressOf, call, upload, whenSignedOut } from '../../web/api/call.ts';
import { newIdempotencyKey } from '../../web/api/idempotency-key.ts';
import { answerRequests, ok, refusal, testSession } from '../helpers/web-answers.ts';

const ID = '00000000-0000-4000-8000-000000000009';
const balance = {
  balanceMinor: 100,
  reservedMinor: 0,
  freeMinor: 100,
  currency: 'USD',
  month: { label: 'December', chargedMinor: 0, runs: 0 },
};
const failure = async (promise: Promise<unknown>): Promise<ApiError> => {
  const error = await promise.then(
    () => null,
    (reason: unknown) => reason,
  );
  expect(error).toBeInstanceOf(ApiError);
  return error as ApiError;
};

beforeEach(() => {
  vi.unstubAllGlobals();
  whenSignedOut(() => undefined);
});

it('fills parameters and query into the address, leaving out what is undefined', () => {
  expect(
    addressOf(listSites, {
      params: { runId: 'a b', runScenarioId: 'c' },
      query: { sort: 'gross', minGustMs: 0, search: undefined },
    }),
  ).toBe('/api/v1/runs/a%20b/scenarios/c/sites?sort=gross&minGustMs=0');
});

it('turns problem details into an ApiError with code, words and request number', async () => {
  answerRequests(() => refusal(404, 'not_found', 'There is no such run.'));
  const error = await failure(call(getRun, { params: { runId: ID } }));
  expect([error.status, error.code, error.message, error.requestId]).toEqual([
    404,
    'not_found',
    'There is no such run.',
    'req-1',
  ]);
});

it('says that the service is silent when nothing answers', async () => {
  vi.stubGlobal('fetch', () => Promise.reject(new TypeError('network')));
  expect((await failure(call(getBalance))).code).toBe('unavailable');
});

it('refuses a reply that isn’t what the contract says', async () => {
  answerRequests(() => ok({ balanceMinor: 'plenty' }));
  expect((await failure(call(getBalance))).code).toBe('internal');
});

it('lets a cancelled request stay a cancellation', async () => {
  vi.stubGlobal('fetch', () => Promise.reject(new DOMException('stop', 'AbortError')));
  await expect(call(getBalance)).rejects.toHaveProperty('name', 'AbortError');
});

it('sends the token of the session with every change, and not with reads', async () => {
  const asked = answerRequests(({ path }) => (path === '/billing/balance' ? ok(balance) : ok(testSession())));
  await call(getSession);
  await call(getBalance);
  await call(acceptNotes, { body: { version: '2026-12-01', name: 'Ines Halvard' } });
  expect(asked.map(({ headers }) => headers.get('x-csrf-token'))).toEqual([null, null, 'csrf-1']);
});

it('sends an idempotency key where the contract asks for one, the same one when told so', async () => {
  const asked = answerRequests(() => refusal(402, 'payment_declined', 'Declined.'));
  const body = { amountMinor: 5000 };
  await failure(call(createTopUp, { body, idempotencyKey: 'one' }));
  await failure(call(createTopUp, { body, idempotencyKey: 'one' }));
  await failure(call(createTopUp, { body }));
  const keys = asked.map(({ headers }) => headers.get('idempotency-key'));
  expect(keys.slice(0, 2)).toEqual(['one', 'one']);
  expect(keys[2]).toMatch(/^[0-9a-f-]{36}$/);
  expect(newIdempotencyKey()).not.toBe(newIdempotencyKey());
});

it('renews a stale session once for many requests, and repeats each of them', async () => {
  let renewed = false;
  const asked = answerRequests(({ path }) => {
    if (path === '/session/refresh') {
      renewed = true;
      return ok(testSession({ csrfToken: 'csrf-2' }));
    }
    return renewed ? ok(balance) : refusal(401, 'not_signed_in', 'Sign in.');
  });
  const both = await Promise.all([call(getBalance), call(getBalance)]);
  expect(both).toEqual([balance, balance]);
  expect(asked.filter(({ path }) => path === '/session/refresh')).toHaveLength(1);
  expect(asked.filter(({ path }) => path === '/billing/balance')).toHaveLength(4);
});

it('reports the end of the session when it can’t be renewed, without trying again', async () => {
  const asked = answerRequests(() => refusal(401, 'not_signed_in', 'Sign in.'));
  const over = vi.fn();
  whenSignedOut(over);
  expect((await failure(call(getBalance))).code).toBe('not_signed_in');
  expect(over).toHaveBeenCalledOnce();
  expect(asked).toHaveLength(2);
});

it('says once that the session is over, and not at all to whoever has signed out', async () => {
  let isSignedIn = true;
  answerRequests(({ path, method }) => {
    if (path === '/session' && method === 'DELETE') return { status: 204, body: null };
    if (path === '/session' && method === 'POST') return ok(testSession({ csrfToken: 'csrf-3' }), 201);
    return isSignedIn ? ok(balance) : refusal(401, 'not_signed_in', 'Sign in.');
  });
  const over = vi.fn();
  whenSignedOut(over);
  const body = { email: 'ines@saltmarsh.example', password: 'high water' };
  await call(signIn, { body });
  isSignedIn = false;
  await Promise.all([failure(call(getBalance)), failure(call(getBalance))]);
  expect(over).toHaveBeenCalledOnce();
  await call(signIn, { body });
  await call(signOut);
  await failure(call(getBalance));
  expect(over).toHaveBeenCalledOnce();
});

it('uploads a file as form data, with progress in bytes', async () => {
  const sent: { form?: FormData; headers: Record<string, string> } = { headers: {} };
  vi.stubGlobal(
    'XMLHttpRequest',
    class {
      upload = new EventTarget();
      status = 422;
      responseText = JSON.stringify(refusal(422, 'file_unreadable', 'No header row.').body);
      private loaded: () => void = () => undefined;
      open() {}
      abort() {}
      setRequestHeader(name: string, value: string) {
        sent.headers[name] = value;
      }
      addEventListener(name: string, listener: () => void) {
        if (name === 'load') this.loaded = listener;
      }
      send(form: FormData) {
        sent.form = form;
        this.upload.dispatchEvent(Object.assign(new Event('progress'), { loaded: 5, total: 10 }));
        this.loaded();
      }
    },
  );
  const onProgress = vi.fn();
  const file = new File(['0123456789'], 'sites.csv');
  const error = await failure(upload(uploadFile, { params: { portfolioId: ID }, file, onProgress }));
  expect(error.message).toBe('No header row.');
  expect((sent.form?.get('file') as File).name).toBe('sites.csv');
  expect(onProgress).toHaveBeenCalledWith(5, 10);
});
