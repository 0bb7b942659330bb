import type { APIResponse, Page } from 'playwright-core';
import { expect, vi } from 'vitest';
import type { Calibration, CurveSet } from '#contract/models.ts';
import type { Edition, Portfolio } from '#contract/portfolios.ts';
import type { Quote, Run } from '#contract/runs.ts';
import type { ReadTrackReply, ScenarioVersion } from '#contract/scenarios.ts';
import type { Session } from '#contract/session.ts';

const PATIENCE = { timeout: 120_000, interval: 250 };

/** Reads from the service as whoever is signed in on the page. */
export const get = async <T>(page: Page, path: string): Promise<T> => {
  const reply = await page.request.get(`/api/v1${path}`);
  expect(reply.status(), `${path}: ${await reply.text()}`).toBe(200);
  return (await reply.json()) as T;
};

/** Sends a change as whoever is signed in on the page; the reply may be a refusal. */
export const send = async (
  page: Page,
  method: 'POST' | 'PUT' | 'DELETE',
  path: string,
  data?: unknown,
): Promise<APIResponse> => {
  const { csrfToken } = await get<Session>(page, '/session');
  return page.request.fetch(`/api/v1${path}`, {
    method,
    data,
    headers: { 'X-CSRF-Token': csrfToken, 'Idempotency-Key': crypto.randomUUID() },
  });
};

const sent = async <T>(...request: Parameters<typeof send>): Promise<T> => {
  const reply = await send(...request);
  expect(reply.ok(), `${request[2]}: ${await reply.text()}`).toBe(true);
  return (await reply.json()) as T;
};

/** A portfolio with one sealed edition, where how it got there isn't what the journey is about. */
export const sealedEdition = async (page: Page, name: string, bytes: Buffer): Promise<Edition> => {
  const { csrfToken } = await get<Session>(page, '/session');
  const portfolio = await sent<Portfolio>(page, 'POST', '/portfolios', { name, currency: 'USD' });
  const upload = await page.request.post(`/api/v1/portfolios/${portfolio.id}/files`, {
    headers: { 'X-CSRF-Token': csrfToken },
    multipart: { file: { name: 'sites.csv', mimeType: 'text/csv', buffer: bytes } },
  });
  expect(upload.status(), await upload.text()).toBe(201);
  const { id, columns } = (await upload.json()) as Edition;
  await sent(page, 'PUT', `/editions/${id}/mapping`, {
    currency: 'USD',
    columns: columns.flatMap(({ index, suggestion }) => (suggestion ? [{ index, field: suggestion.field }] : [])),
  });
  await vi.waitFor(async () => expect((await get<Edition>(page, `/editions/${id}`)).state).toBe('checked'), PATIENCE);
  return sent<Edition>(page, 'POST', `/editions/${id}/seal`, {
    asAt: '2022-09-01',
    heldReason: 'Asked the broker',
    controlReason: null,
  });
};

/** A saved scenario from best-track text. */
export const savedTrack = async (page: Page, name: string, text: string): Promise<ScenarioVersion> => {
  const read = await sent<ReadTrackReply>(page, 'POST', '/scenarios/read', { text });
  return sent<ScenarioVersion>(page, 'POST', '/scenarios', {
    name,
    track: { fixes: read.fixes, declarations: { windAveragingS: read.windAveragingS, source: 'Best track' } },
  });
};

/** A run from quote to end. */
export const finishedRun = async (page: Page, editionId: string, scenarioVersionId: string): Promise<Run> => {
  const [{ items: calibrations }, { items: curveSets }] = await Promise.all([
    get<{ items: Calibration[] }>(page, '/calibrations'),
    get<{ items: CurveSet[] }>(page, '/curve-sets'),
  ]);
  const quote = await sent<Quote>(page, 'POST', '/quotes', {
    editionId,
    scenarioVersionIds: [scenarioVersionId],
    calibrationId: calibrations[0]!.id,
    curveSetId: curveSets[0]!.id,
    options: {},
    purpose: 'exploratory',
  });
  const { id } = await sent<Run>(page, 'POST', `/quotes/${quote.id}/accept`);
  await vi.waitFor(async () => expect((await get<Run>(page, `/runs/${id}`)).state).toBe('complete'), PATIENCE);
  return get<Run>(page, `/runs/${id}`);
};
