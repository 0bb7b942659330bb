import { randomUUID } from 'node:crypto';
import type { Knex } from 'knex';
import type { DamageCurve } from '#contract/models.ts';
import type { QuoteRequest } from '#contract/runs.ts';
import type { Track } from '#contract/scenarios.ts';
import { REFERENCE_CURVE } from '#engine/loss/damage-curve.ts';
import type { Actor } from '../../actor.ts';

const AT = new Date('2026-12-01T00:00:00Z');
const ROWS_AT_ONCE = 500;

/** A made-up storm that comes ashore on the north-eastern Gulf coast. */
const TRACK: Track = {
  declarations: { windAveragingS: 60, source: 'Made up for the bench', asOf: null },
  fixes: [
    [0, 25.8, -87.0, 965, 44, 42],
    [6, 27.0, -86.7, 955, 50, 38],
    [12, 28.2, -86.2, 948, 54, 35],
    [18, 29.5, -85.6, 945, 55, 33],
    [24, 30.8, -85.0, 962, 42, 40],
    [30, 32.2, -84.2, 982, 30, 55],
  ].map(([hour, latitude, longitude, pressure, wind, radius]) => ({
    time: new Date(Date.parse('2026-09-03T00:00:00Z') + hour! * 3_600_000).toISOString(),
    latitude: latitude!,
    longitude: longitude!,
    centralPressureHpa: pressure!,
    ambientPressureHpa: 1010,
    maxWindMs: wind!,
    radiusOfMaxWindM: radius! * 1000,
    radius34KtM: null,
    radius50KtM: null,
    radius64KtM: null,
    ringWidthFraction: null,
    eyeVorticityRatio: null,
    hoursInland: null,
  })),
};

/** Numbers of a generator whose seed is fixed: the same sites each time. */
const numbers = (seed: number) => () => {
  seed = (Math.imul(seed, 1664525) + 1013904223) >>> 0;
  return seed / 2 ** 32;
};

/** An organisation with a sealed edition on that coast, a track, models and money, stored past intake. */
export const addBenchBook = async (
  superUser: Knex,
  siteCount: number,
): Promise<{ actor: Actor; request: QuoteRequest }> => {
  const [orgId, userId, portfolioId, editionId, fileId] = Array.from({ length: 5 }, () => randomUUID()) as [
    string,
    string,
    string,
    string,
    string,
  ];
  const [scenarioId, versionId, curveSetId, calibrationId] = Array.from({ length: 4 }, () => randomUUID()) as [
    string,
    string,
    string,
    string,
  ];
  const email = `${userId}@bench.example`;
  const next = numbers(siteCount);
  const sites = Array.from({ length: siteCount }, (_, i) => {
    const latitude = 29.9 + 1.8 * next();
    const longitude = -87.2 + 3.4 * next();
    const tiv = Math.round((2e5 + 3e6 * next()) * 100);
    const isOpen = next() < 0.5;
    return {
      ...{ org_id: orgId, edition_id: editionId, site_no: i + 1, file_row: i + 2 },
      ...{ site_ref: `S-${String(i + 1).padStart(6, '0')}`, label: `Warehouse ${i + 1}`, town: `Town ${i % 40}` },
      ...{ point: `SRID=4326;POINT(${longitude} ${latitude})`, latitude, longitude, location_quality: 'building' },
      ...{ building_minor: tiv, other_structures_minor: 0, contents_minor: 0, time_element_minor: 0, tiv_minor: tiv },
      ...{ construction: 'masonry', occupancy: 'industrial', terrain: isOpen ? 'open' : 'suburban' },
      ...{ roughness_m: isOpen ? 0.03 : 0.3, deductible_minor: Math.round(tiv * 0.02), limit_minor: null },
      ...{ state: 'ready', assumed: '{}' },
    };
  });
  const tivMinor = sites.reduce((sum, site) => sum + site.tiv_minor, 0);
  const none = { rows: 0, tivMinor: 0 };
  const reconciliation = {
    ...{ fileRows: siteCount, tivMinor, ready: { rows: siteCount, tivMinor } },
    ...{ notes: none, held: none, setAside: none },
  };
  const curve: DamageCurve = { ...REFERENCE_CURVE, name: 'Cubic curve' };
  const settings = { intensity: 'pressure', anchor: 'auto', ringWidthFraction: 0.35, eyeVorticityRatio: 0.2 };
  await superUser.transaction(async (tx) => {
    await tx('organisations').insert({ id: orgId, name: 'Bench Mutual', initials: 'BM' });
    await tx('users').insert({ id: userId, name: 'Bench', email, password_hash: '!' });
    await tx('memberships').insert({ org_id: orgId, user_id: userId, roles: ['underwriter'] });
    await tx('portfolios').insert({
      ...{ id: portfolioId, org_id: orgId, name: 'Bench book', currency: 'USD', created_by: userId, created_at: AT },
    });
    await tx('files').insert({
      ...{ id: fileId, org_id: orgId, name: 'bench.csv', bytes: 0, digest: '', uploaded_by: userId, uploaded_at: AT },
    });
    await tx('editions').insert({
      ...{ id: editionId, org_id: orgId, portfolio_id: portfolioId, number: 1, state: 'checked', currency: 'USD' },
      ...{ file_id: fileId, style: '{}', columns: '[]', header_digest: '', created_at: AT, updated_at: AT },
      reconciliation: JSON.stringify(reconciliation),
    });
    for (let i = 0; i < siteCount; i += ROWS_AT_ONCE) await tx('sites').insert(sites.slice(i, i + ROWS_AT_ONCE));
    await tx('editions')
      .where({ id: editionId })
      .update({ state: 'sealed', as_at: '2026-11-30', digest: 'a'.repeat(64), sealed_at: AT, sealed_by: userId });
    await tx('scenarios').insert({
      ...{ id: scenarioId, org_id: orgId, name: 'Bench storm', created_by: userId, created_at: AT },
    });
    await tx('scenario_versions').insert({
      ...{ id: versionId, org_id: orgId, scenario_id: scenarioId, number: 1, track: JSON.stringify(TRACK) },
      ...{ resolution: JSON.stringify({ path: TRACK.fixes.map((fix) => [fix.longitude, fix.latitude]) }) },
      ...{ digest: 'b'.repeat(64), created_by: userId, created_at: AT },
    });
    await tx('curve_sets').insert({
      ...{ id: curveSetId, org_id: orgId, name: 'Bench curve', version: 1, state: 'approved', note: '' },
      ...{ curve: JSON.stringify(curve), digest: 'c'.repeat(64), created_at: AT },
    });
    await tx('calibrations').insert({
      ...{
        id: calibrationId,
        org_id: orgId,
        code: 'CAL-1',
        version: 1,
        state: 'signed',
        note: '',
        digest: 'd'.repeat(64),
      },
      ...{ settings: JSON.stringify(settings), curve_set_id: curveSetId, created_at: AT },
    });
    await tx('balances').insert({ org_id: orgId, free_minor: 10_000_000, reserved_minor: 0, currency: 'USD' });
  });
  return {
    actor: { userId, orgId, name: 'Bench', email, roles: ['underwriter'], isApprover: false },
    request: {
      ...{
        editionId,
        scenarioVersionIds: [versionId],
        calibrationId,
        curveSetId,
        purpose: 'exploratory',
        costCentre: '',
      },
      options: { mesovortices: true, intensity: 'pressure', anchor: 'auto', gustThresholdsMs: [40, 50] },
    },
  };
};
