import { randomUUID } from 'node:crypto';
import type { RequestHandler, Router } from 'express';
import type { Test } from 'supertest';
import { describe, expect, it } from 'vitest';
import { z } from 'zod';
import { ALL_ENDPOINTS } from '#contract/all.ts';
import type { Endpoint } from '#contract/endpoint.ts';
import type { Role } from '#contract/roles.ts';
import { endpointOf } from '../../api/http/handle.ts';
import { createTestApp, type Browser } from '../helpers/app.ts';
import { addObjects, fingerprintOf, TRACK_FIX } from '../helpers/foreign-objects.ts';
import { DUNE, REEF } from '../helpers/people.ts';

const { container, database, signIn } = await createTestApp();
const theirs = await addObjects(database.superUser, REEF);
const nobodys = Object.fromEntries(
  Object.keys(theirs).map((name) => [name, name === 'siteNo' || name === 'draw' ? '1' : randomUUID()]),
);

const later = { ...TRACK_FIX, time: '2026-09-01T06:00:00.000Z', latitude: 26 };
const track = { fixes: [TRACK_FIX, later], declarations: { windAveragingS: 60 } };
const quoteOf = (ids: Record<string, string>) => ({
  ...{ editionId: ids.editionId, scenarioVersionIds: [ids.scenarioVersionId], calibrationId: ids.calibrationId },
  ...{ curveSetId: ids.curveSetId, options: {}, purpose: 'exploratory' },
});
/** A body that would do for each operation with an id in its path or body; a new one is added here. */
const BODIES: Record<string, (ids: Record<string, string>) => object> = {
  mapColumns: () => ({ columns: [{ index: 0, field: 'site_ref' }], currency: 'USD' }),
  applyFix: () => ({ code: 'GEO-04', kind: 'exclude', reason: 'As agreed' }),
  sealEdition: () => ({ asAt: '2026-11-01', heldReason: 'As agreed', controlReason: 'As agreed' }),
  saveVersion: () => ({ track, basedOn: 1 }),
  createQuote: quoteOf,
  setRing: () => ({ basedOn: 1, ringWidthFraction: 0.3, eyeVorticityRatio: 0.1 }),
  draftCalibration: ({ calibrationId }) => ({
    ...{ basedOnId: calibrationId, ringWidthFraction: 0.3, eyeVorticityRatio: 0.1, note: 'Thinner' },
  }),
  spread: ({ editionId }) => ({ editionId }),
  windField: () => ({ time: TRACK_FIX.time }),
  previewVariants: () => ({ changes: [{ offsetKm: 40 }] }),
  saveVariants: () => ({ changes: [{ offsetKm: 40 }] }),
};
/** Operations that take ids in their body only. */
const IDS_IN_BODY = ['createQuote', 'draftCalibration'];

const namesIn = ({ path }: Endpoint) => [...path.matchAll(/:(\w+)/g)].map((found) => found[1]!);
const withIds = ALL_ENDPOINTS.filter((endpoint) => namesIn(endpoint).length > 0 || IDS_IN_BODY.includes(endpoint.id));
const listing = ALL_ENDPOINTS.filter(
  ({ method, access, path }) => method === 'get' && access !== 'public' && !path.includes(':'),
);

const browsers = new Map<Role, Browser>();
const personFor = async ({ access }: Endpoint): Promise<Browser> => {
  const role: Role = Array.isArray(access) ? (access as Role[])[0]! : 'underwriter';
  const browser = browsers.get(role) ?? (await signIn(role));
  browsers.set(role, browser);
  return browser;
};

const call = (browser: Browser, endpoint: Endpoint, ids: Record<string, string>): Test => {
  const path = endpoint.path.replace(/:(\w+)/g, (_, name: string) => ids[name] ?? `no-example-of-${name}`);
  const body = BODIES[endpoint.id]?.(ids);
  if (endpoint.upload) return browser.post(path).attach('file', Buffer.from('ref,lat\n1,2\n'), 'sites.csv');
  if (endpoint.method === 'get') return browser.get(path);
  return endpoint.method === 'delete' ? browser.delete(path) : browser[endpoint.method](path, body);
};

interface Layer {
  route?: { path: string; stack: { method: string; handle: RequestHandler }[] };
}
const mounted = container.appParts.routers
  .flatMap((router) => (router as Router & { stack: Layer[] }).stack)
  .flatMap(({ route }) =>
    (route?.stack ?? []).flatMap(({ method, handle }) => {
      const endpoint = endpointOf(handle);
      return endpoint ? [{ method, path: route!.path, endpoint }] : [];
    }),
  );

describe('every operation of the contract', () => {
  it.each(ALL_ENDPOINTS.map((endpoint) => [endpoint.id, endpoint] as const))(
    '%s is mounted once, where it says',
    (_id, endpoint) => {
      const places = mounted.filter((place) => place.endpoint === endpoint);
      expect(places.map(({ method, path }) => [method, path])).toEqual([[endpoint.method, endpoint.path]]);
    },
  );
  it('has an id and an address of its own', () => {
    expect(new Set(ALL_ENDPOINTS.map(({ id }) => id)).size).toBe(ALL_ENDPOINTS.length);
    expect(new Set(ALL_ENDPOINTS.map(({ method, path }) => `${method} ${path}`)).size).toBe(ALL_ENDPOINTS.length);
  });
  it.each(withIds.map((endpoint) => [endpoint.id, endpoint] as const))(
    '%s has examples for the walk below',
    (_id, endpoint) => {
      for (const name of namesIn(endpoint)) expect(theirs).toHaveProperty(name);
      if (endpoint.params) expect(endpoint.params.safeParse(theirs).success).toBe(true);
      if (endpoint.body && endpoint.body instanceof z.ZodObject) {
        const body = BODIES[endpoint.id]?.(theirs);
        expect(endpoint.body.safeParse(body).error).toBeUndefined();
      }
    },
  );
  it('is closed to strangers without a session, but for signing in and out', async () => {
    const { bare } = await signIn('auditor');
    bare.jar.setCookies(['gustloom_access=; Path=/', 'gustloom_csrf=; Path=/']);
    const open = ALL_ENDPOINTS.filter(({ access }) => access === 'public').map(({ id }) => id);
    expect(open.sort()).toEqual(['refreshSession', 'signIn', 'signOut']);
  });
});

describe('somebody of another organisation', () => {
  it.each(withIds.map((endpoint) => [endpoint.id, endpoint] as const))(
    'gets the same “not found” from %s for what is theirs as for what is nobody’s',
    async (_id, endpoint) => {
      const browser = await personFor(endpoint);
      const before = await fingerprintOf(database.superUser, REEF);
      const foreign = await call(browser, endpoint, theirs);
      const nothing = await call(browser, endpoint, nobodys);
      expect([foreign.status, foreign.body.code]).toEqual([404, 'not_found']);
      const plain = (reply: typeof foreign, ids: Record<string, string>) =>
        Object.values(ids)
          .filter((id) => id.length > 10)
          .reduce((text, id) => text.replaceAll(id, '‹id›'), JSON.stringify({ ...reply.body, requestId: '' }));
      expect(plain(foreign, theirs)).toBe(plain(nothing, nobodys));
      expect(await fingerprintOf(database.superUser, REEF)).toEqual(before);
    },
  );
  it.each(listing.map((endpoint) => [endpoint.id, endpoint] as const))(
    'finds nothing of theirs in %s',
    async (_id, endpoint) => {
      const browser = await personFor(endpoint);
      const reply = await browser.get(endpoint.path);
      expect(reply.status).toBeLessThan(500);
      for (const id of [REEF.id, ...Object.values(theirs).filter((value) => value.length > 10)])
        expect(reply.text).not.toContain(id);
      expect(reply.text).not.toContain(REEF.name);
    },
  );
  it('though they are there: their own people find them', async () => {
    const owner = await signIn('underwriter', { org: REEF });
    const portfolio = await owner.get(`/portfolios/${theirs.portfolioId}`).expect(200);
    expect(portfolio.body.name).toBe('Of theirs');
  });
  it('is somebody else', () => expect(DUNE.id).not.toBe(REEF.id));
});
