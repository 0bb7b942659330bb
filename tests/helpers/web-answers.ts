import { vi } from 'vitest';
import type { Session } from '#contract/session.ts';

export interface Asked {
  method: string;
  path: string;
  query: URLSearchParams;
  headers: Headers;
  body: unknown;
}

type Answer = { status: number; body: unknown };

export const ok = (body: unknown, status = 200): Answer => ({ status, body });
export const refusal = (status: number, code: string, detail: string): Answer => ({
  status,
  body: { type: 'about:blank', title: code, status, detail, code, requestId: 'req-1', faults: [] },
});

/** Answers the client's requests in a test; returns the list of what was asked. */
export const answerRequests = (answer: (asked: Asked) => Answer): Asked[] => {
  const asked: Asked[] = [];
  vi.stubGlobal('fetch', (address: string, init: RequestInit) => {
    const url = new URL(address, 'http://localhost');
    const request: Asked = {
      method: init.method ?? 'GET',
      path: url.pathname.replace('/api/v1', ''),
      query: url.searchParams,
      headers: new Headers(init.headers),
      body: typeof init.body === 'string' ? (JSON.parse(init.body) as unknown) : undefined,
    };
    asked.push(request);
    const { status, body } = answer(request);
    return Promise.resolve(
      new Response(body === null ? null : JSON.stringify(body), {
        status,
        headers: { 'content-type': 'application/json' },
      }),
    );
  });
  return asked;
};

export const testSession = (changes: Partial<Session> = {}): Session => ({
  person: { id: '00000000-0000-4000-8000-000000000001', name: 'Ines Halvard', email: 'ines@saltmarsh.example' },
  organisation: { id: '00000000-0000-4000-8000-000000000002', name: 'Saltmarsh Mutual', initials: 'SM' },
  roles: ['underwriter'],
  isApprover: false,
  acceptanceRequired: null,
  csrfToken: 'csrf-1',
  ...changes,
});
