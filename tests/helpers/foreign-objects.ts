import { randomUUID } from 'node:crypto';
import type { Knex } from 'knex';
import type { TestOrganisation } from './people.ts';

export const TRACK_FIX = {
  time: '2026-09-01T00:00:00.000Z',
  latitude: 25,
  longitude: -80,
  centralPressureHpa: 960,
  ambientPressureHpa: 1010,
  maxWindMs: 45,
  radiusOfMaxWindM: 40_000,
  radius34KtM: null,
  radius50KtM: null,
  radius64KtM: null,
  ringWidthFraction: null,
  eyeVorticityRatio: null,
  hoursInland: null,
};
const DIGEST = 'a'.repeat(64);

/**
 * One object of every kind an organisation can have, straight into the tables, by the name its id has in the contract's
 * paths and bodies. A new kind of id is added here once; the walk of all endpoints then uses it.
 */
export const addObjects = async (superUser: Knex, org: TestOrganisation): Promise<Record<string, string>> => {
  const ids = {
    portfolioId: randomUUID(),
    editionId: randomUUID(),
    scenarioId: randomUUID(),
    scenarioVersionId: randomUUID(),
    curveSetId: randomUUID(),
    calibrationId: randomUUID(),
    quoteId: randomUUID(),
    runId: randomUUID(),
    runScenarioId: randomUUID(),
    topUpId: randomUUID(),
  };
  const fileId = randomUUID();
  const by = org.people.underwriter.id;
  const at = new Date('2026-11-30T12:00:00Z');
  const mine = { org_id: org.id };
  const add = (table: string, row: object) => superUser(table).insert({ ...mine, ...row });

  await add('files', { id: fileId, name: 'sites.csv', bytes: 1, digest: DIGEST, uploaded_by: by, uploaded_at: at });
  await add('portfolios', { id: ids.portfolioId, name: 'Of theirs', currency: 'USD', created_by: by, created_at: at });
  await add('editions', {
    ...{
      id: ids.editionId,
      portfolio_id: ids.portfolioId,
      number: 1,
      state: 'checked',
      currency: 'USD',
      as_at: '2026-11-01',
    },
    ...{ file_id: fileId, header_digest: DIGEST, style: '{}', columns: '[]', created_at: at, updated_at: at },
  });
  await add('scenarios', { id: ids.scenarioId, name: 'Of theirs', created_by: by, created_at: at });
  await add('scenario_versions', {
    ...{
      id: ids.scenarioVersionId,
      scenario_id: ids.scenarioId,
      number: 1,
      digest: DIGEST,
      created_by: by,
      created_at: at,
    },
    ...{ track: JSON.stringify({ fixes: [TRACK_FIX] }), resolution: '{}' },
  });
  await add('curve_sets', {
    ...{ id: ids.curveSetId, name: 'Of theirs', version: 1, state: 'approved', note: '', curve: '{}', digest: DIGEST },
    created_at: at,
  });
  await add('calibrations', {
    ...{ id: ids.calibrationId, code: 'X', version: 1, state: 'draft', note: '', settings: '{}', digest: DIGEST },
    ...{ curve_set_id: ids.curveSetId, created_at: at },
  });
  await add('quotes', {
    ...{ id: ids.quoteId, number: 'Q-1', request: '{}', edition_id: ids.editionId, lines: '[]', gross_minor: 500 },
    ...{
      currency: 'USD',
      tariff_version: 1,
      inputs_digest: DIGEST,
      engine_version: 'x',
      created_by: by,
      created_at: at,
    },
    valid_until: new Date('2099-01-01T00:00:00Z'),
  });
  await add('runs', {
    ...{ id: ids.runId, number: 'R-1', quote_id: ids.quoteId, edition_id: ids.editionId },
    ...{ calibration_id: ids.calibrationId, curve_set_id: ids.curveSetId, options: '{}', purpose: 'underwriting' },
    ...{
      stamped: false,
      state: 'waiting',
      engine_version: 'x',
      inputs_digest: DIGEST,
      quoted_minor: 500,
      currency: 'USD',
    },
    ...{ accepted_by: by, accepted_at: at },
  });
  await add('run_scenarios', {
    ...{ id: ids.runScenarioId, run_id: ids.runId, seq: 1, scenario_version_id: ids.scenarioVersionId },
    ...{ state: 'waiting', sites_total: 1 },
  });
  await add('payments', {
    id: ids.topUpId,
    amount_minor: 5000,
    currency: 'USD',
    state: 'pending',
    created_by: by,
    created_at: at,
  });
  return { ...ids, siteNo: '1', draw: '1' };
};

/** A fingerprint of everything an organisation has, to see that nobody else changed it. */
export const fingerprintOf = async (superUser: Knex, org: TestOrganisation): Promise<Record<string, string | null>> => {
  const { rows } = await superUser.raw<{ rows: { name: string }[] }>(`
    select distinct table_name as name from information_schema.columns
    where table_schema = 'public' and column_name = 'org_id' order by 1`);
  const prints: Record<string, string | null> = {};
  for (const { name } of rows) {
    const print = await superUser.raw<{ rows: { md5: string | null }[] }>(
      `select md5(string_agg(t::text, '|' order by t::text)) from ?? t where org_id = ?`,
      [name, org.id],
    );
    prints[name] = print.rows[0]?.md5 ?? null;
  }
  return prints;
};
