import { randomUUID } from 'node:crypto';
import type { DamageCurve } from '#contract/models.ts';
import type { QuoteRequest } from '#contract/runs.ts';
import type { Track } from '#contract/scenarios.ts';
import { REFERENCE_CURVE } from '#engine/loss/damage-curve.ts';
import type { TestDatabase } from './database.ts';
import { DUNE, type TestOrganisation } from './people.ts';

const AT = new Date('2026-11-30T09:00:00Z');
const digestOf = (seed: string) => Buffer.from(seed.padEnd(32, '.')).subarray(0, 32).toString('hex');

/** A made-up storm that comes ashore on the north-eastern Gulf coast; `shift` moves it east. */
export const gulfTrack = (shift = 0, asOf: string | null = null): Track => ({
  declarations: { windAveragingS: 60, source: 'Made up for tests', asOf },
  fixes: [
    [0, 27.6, -86.4, 958, 48, 38],
    [6, 28.8, -85.9, 950, 52, 35],
    [12, 30.0, -85.4, 952, 50, 35],
    [18, 31.3, -84.8, 972, 36, 45],
  ].map(([hour, latitude, longitude, pressure, wind, radius]) => ({
    time: new Date(Date.parse('2026-09-03T00:00:00Z') + hour! * 3_600_000).toISOString(),
    latitude: latitude!,
    longitude: longitude! + shift,
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
});

interface FixtureOptions {
  org?: TestOrganisation;
  sites?: number;
  /** Sites beyond the first so many are put far away, out of the storm's reach. */
  near?: number;
  heldRows?: number;
  balanceMinor?: number;
  sealed?: boolean;
  siteRef?: (no: number) => string;
  label?: (no: number) => string;
}

export interface RunFixture {
  org: TestOrganisation;
  portfolioId: string;
  editionId: string;
  calibrationId: string;
  unsignedCalibrationId: string;
  curveSetId: string;
  /** Saves a track as a scenario and gives its version. */
  addTrack(name: string, track?: Track): Promise<string>;
  request(scenarioVersionIds: string[], more?: Partial<QuoteRequest>): QuoteRequest;
}

/** Numbers of a generator whose seed is fixed: the same sites each time. */
const numbers = (seed: number) => () => {
  seed = (Math.imul(seed, 1664525) + 1013904223) >>> 0;
  return seed / 2 ** 32;
};

/** What a run needs: a sealed edition, models, and a balance. Stored past intake, which has tests of its own. */
export const addRunFixture = async (
  { superUser }: Pick<TestDatabase, 'superUser'>,
  {
    org = DUNE,
    sites = 60,
    near = sites,
    heldRows = 2,
    balanceMinor = 100_000,
    sealed = true,
    ...names
  }: FixtureOptions = {},
): Promise<RunFixture> => {
  const by = org.people.modeler.id;
  const [portfolioId, editionId, fileId] = [randomUUID(), randomUUID(), randomUUID()];
  const [curveSetId, calibrationId, unsignedCalibrationId] = [randomUUID(), randomUUID(), randomUUID()];
  const next = numbers(7);
  const rows = Array.from({ length: sites }, (_, i) => {
    const no = i + 1;
    const far = no > near;
    const latitude = far ? 45 + next() : 29.7 + 1.3 * next();
    const longitude = far ? -120 - next() : -86.4 + 2.2 * next();
    const tiv = Math.round((2e5 + 3e6 * next()) * 100);
    const terrain = next();
    return {
      org_id: org.id,
      edition_id: editionId,
      site_no: no,
      file_row: no + 1,
      site_ref: names.siteRef?.(no) ?? `S-${String(no).padStart(6, '0')}`,
      label: names.label?.(no) ?? `Warehouse ${no}`,
      town: no % 2 === 0 ? 'Port Alder' : 'Tern Beach',
      point: `SRID=4326;POINT(${longitude} ${latitude})`,
      latitude,
      longitude,
      location_quality: 'building',
      building_minor: tiv,
      other_structures_minor: 0,
      contents_minor: 0,
      time_element_minor: 0,
      tiv_minor: tiv,
      construction: 'masonry',
      occupancy: 'industrial',
      terrain: terrain < 0.5 ? 'open' : 'suburban',
      roughness_m: terrain < 0.5 ? 0.03 : 0.3,
      deductible_minor: Math.round(tiv * 0.02),
      limit_minor: no % 3 === 0 ? Math.round(tiv * 0.8) : null,
      state: 'ready',
      assumed: '{}',
    };
  });
  const tivMinor = rows.reduce((sum, row) => sum + row.tiv_minor, 0);
  const none = { rows: 0, tivMinor: 0 };
  const held = { rows: heldRows, tivMinor: heldRows * 1_000_000 };
  const curve: DamageCurve = { ...REFERENCE_CURVE, name: 'Cubic curve on local gusts' };
  await superUser.transaction(async (tx) => {
    await tx('portfolios').insert({
      ...{ id: portfolioId, org_id: org.id, name: `Book ${portfolioId.slice(0, 4)}`, currency: 'USD' },
      ...{ created_by: by, created_at: AT },
    });
    await tx('files').insert({
      ...{ id: fileId, org_id: org.id, name: 'book.csv', bytes: 1, digest: digestOf('file') },
      ...{ uploaded_by: by, uploaded_at: AT },
    });
    await tx('editions').insert({
      ...{ id: editionId, org_id: org.id, portfolio_id: portfolioId, number: 1, state: 'checked', currency: 'USD' },
      ...{ file_id: fileId, style: '{}', columns: '[]', header_digest: '', created_at: AT, updated_at: AT },
      reconciliation: JSON.stringify({
        fileRows: sites + heldRows,
        tivMinor: tivMinor + held.tivMinor,
        ...{ ready: { rows: sites, tivMinor }, notes: none, held, setAside: none },
      }),
      assumed_tiv_minor: Math.round(tivMinor / 4),
      assumed_sites: Math.round(sites / 4),
    });
    for (let i = 0; i < rows.length; i += 500) await tx('sites').insert(rows.slice(i, i + 500));
    if (sealed) {
      await tx('editions')
        .where({ id: editionId })
        .update({ state: 'sealed', as_at: '2026-11-30', digest: digestOf(editionId), sealed_at: AT, sealed_by: by });
    }
    await tx('curve_sets').insert({
      ...{ id: curveSetId, org_id: org.id, name: 'Test curve', version: 1, state: 'approved', note: 'For tests.' },
      ...{ curve: JSON.stringify(curve), digest: digestOf('curve'), created_at: AT },
    });
    const settings = JSON.stringify({
      intensity: 'pressure',
      anchor: 'auto',
      ringWidthFraction: 0.35,
      eyeVorticityRatio: 0.2,
    });
    const calibration = {
      org_id: org.id,
      code: 'CAL-1',
      note: 'For tests.',
      settings,
      curve_set_id: curveSetId,
      created_at: AT,
    };
    await tx('calibrations').insert([
      {
        ...{ ...calibration, id: calibrationId, version: 1, state: 'signed', digest: digestOf('signed') },
        ...{ signed_by: by, signed_at: AT },
      },
      { ...calibration, id: unsignedCalibrationId, version: 2, state: 'draft', digest: digestOf('draft') },
    ]);
    const opening = {
      ...{ org_id: org.id, movement_id: randomUUID(), kind: 'opening', currency: 'USD', text: 'Opening', at: AT },
    };
    await tx('ledger_entries').insert([
      { ...opening, account: 'free', amount_minor: balanceMinor },
      { ...opening, account: 'opening', amount_minor: -balanceMinor },
    ]);
    await tx('balances').insert({ org_id: org.id, free_minor: balanceMinor, reserved_minor: 0, currency: 'USD' });
  });
  return {
    ...{ org, portfolioId, editionId, calibrationId, unsignedCalibrationId, curveSetId },
    addTrack: async (name, track = gulfTrack()) => {
      const [scenarioId, versionId] = [randomUUID(), randomUUID()];
      const path = track.fixes.map(({ longitude, latitude }) => [longitude, latitude]);
      await superUser('scenarios').insert({
        ...{ id: scenarioId, org_id: org.id, name, created_by: by, created_at: AT },
      });
      await superUser('scenario_versions').insert({
        ...{ id: versionId, org_id: org.id, scenario_id: scenarioId, number: 1, track: JSON.stringify(track) },
        ...{ resolution: JSON.stringify({ path }), as_of: track.declarations.asOf, digest: digestOf(versionId) },
        ...{ created_by: by, created_at: AT },
      });
      return versionId;
    },
    request: (scenarioVersionIds, more = {}) => ({
      ...{ editionId, scenarioVersionIds, calibrationId, curveSetId },
      options: { mesovortices: true, intensity: 'pressure', anchor: 'auto', gustThresholdsMs: [40, 50] },
      ...{ purpose: 'exploratory', costCentre: '', ...more },
    }),
  };
};
