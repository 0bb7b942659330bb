import { createHash } from 'node:crypto';
import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { Problem } from '#contract/errors.ts';
import { ReadTrackReply, ScenarioVersion, listScenarios, type Fix, type Track } from '#contract/scenarios.ts';
import { ScenarioReader } from '../../api/features/scenarios/scenario-reader.ts';
import { createTestApp } from '../helpers/app.ts';
import { DUNE, REEF } from '../helpers/people.ts';

const { database, clock, signIn } = await createTestApp();
const modeler = await signIn('modeler');
const stranger = await signIn('modeler', { org: REEF });

const fixAt = (hour: number, over: Partial<Fix> = {}): Fix => ({
  time: new Date(Date.UTC(2030, 8, 1, hour)).toISOString(),
  latitude: 20 + hour / 10,
  longitude: -80,
  centralPressureHpa: 960,
  ambientPressureHpa: null,
  maxWindMs: 45,
  radiusOfMaxWindM: null,
  radius34KtM: null,
  radius50KtM: null,
  radius64KtM: null,
  ringWidthFraction: null,
  eyeVorticityRatio: null,
  hoursInland: null,
  ...over,
});
const track: Track = {
  fixes: [fixAt(0), fixAt(6), fixAt(12)],
  declarations: { windAveragingS: 600, source: 'Made up for a test', asOf: null },
};
const moved = (fixes: Fix[]): Track => ({ ...track, fixes });

let named = 0;
const create = async (given: Partial<{ name: string; track: Track; sortByTime: boolean }> = {}) => {
  named += 1;
  const reply = await modeler.post('/scenarios', { name: `Storm ${named}`, track, ...given }).expect(201);
  return ScenarioVersion.parse(reply.body);
};
const problemOf = (reply: { status: number; body: unknown }) => Problem.parse(reply.body);

describe('a saved scenario', () => {
  it('comes back with its track as entered, both maxima and the notes', async () => {
    const saved = await create();
    expect(saved).toMatchObject({ number: 1, createdBy: DUNE.people.modeler.name, track });
    expect(saved.digest).toMatch(/^[0-9a-f]{64}$/);
    expect(saved.resolution.maxima).toMatchObject({ reportedMs: 45 * 1.05, used: 'pressure' });
    expect(saved.notices.map(({ code }) => code)).toContain('life-safety');
    const again = ScenarioVersion.parse((await modeler.get(`/scenarios/${saved.scenarioId}`).expect(200)).body);
    expect(again).toEqual(saved);
  });

  it('says that it is provisional when it is taken from an advisory', async () => {
    const advisory = { ...track, declarations: { ...track.declarations, asOf: '2030-09-01T00:00:00.000Z' } };
    expect((await create({ track: advisory })).notices.map(({ code }) => code)).toContain('provisional');
  });

  it('is stale once its advisory is older than six hours, at the time of reading', async () => {
    const at = (hoursAgo: number) => new Date(clock.now().getTime() - hoursAgo * 3_600_000).toISOString();
    const from = (asOf: string) => ({ ...track, declarations: { ...track.declarations, asOf } });
    expect((await create()).stale).toBeNull();
    expect((await create({ track: from(at(7)) })).stale).toEqual({ asOf: at(7), ageHours: 7 });
    const { scenarioId, stale } = await create({ track: from(at(5)) });
    expect(stale).toBeNull();
    clock.pass(2 * 3_600_000);
    const again = ScenarioVersion.parse((await modeler.get(`/scenarios/${scenarioId}`).expect(200)).body);
    expect(again.stale!.ageHours).toBeCloseTo(7, 9);
    const { items } = listScenarios.response.parse((await modeler.get('/scenarios?limit=500').expect(200)).body);
    expect(items.find(({ id }) => id === scenarioId)!.stale).toEqual(again.stale);
  });

  it('keeps the digest it had before 34- and 50-kt radii were read', async () => {
    const old = moved([fixAt(0), fixAt(6)].map(({ radius34KtM: _34, radius50KtM: _50, ...fix }) => fix as Fix));
    const bare = await create({ track: old });
    // Of the fields in their fixed order, as they were written down before there were others.
    const canonical = [
      ...['track-1', 600, 'Made up for a test', null],
      [fixAt(0), fixAt(6)].map((fix) => [
        ...[fix.time, fix.latitude, fix.longitude, 960, null, 45, null, null, null, null, null],
      ]),
    ];
    expect(bare.digest).toBe(createHash('sha256').update(JSON.stringify(canonical)).digest('hex'));
    expect(bare.track.fixes[0]).toMatchObject({ radius34KtM: null, radius50KtM: null });
    const wider = await create({ track: moved([fixAt(0, { radius34KtM: [1e5, 1e5, 1e5, 1e5] }), fixAt(6)]) });
    expect(wider.digest).not.toBe(bare.digest);
  });

  it('gets a next version, and refuses one based on an old one', async () => {
    const first = await create();
    const path = `/scenarios/${first.scenarioId}/versions`;
    const edited = moved([fixAt(0), fixAt(6, { centralPressureHpa: 950 }), fixAt(12)]);
    const second = ScenarioVersion.parse((await modeler.post(path, { track: edited, basedOn: 1 }).expect(201)).body);
    expect(second).toMatchObject({ number: 2, scenarioId: first.scenarioId, name: first.name });
    expect(second.digest).not.toBe(first.digest);
    const late = await modeler.post(path, { track, basedOn: 1 });
    expect([late.status, problemOf(late).code]).toEqual([409, 'conflict']);
    expect(problemOf(late).detail).toContain(`${DUNE.people.modeler.name} saved version 2 meanwhile`);
  });

  it('lets one of two people saving at the same moment through', async () => {
    const { scenarioId } = await create();
    const path = `/scenarios/${scenarioId}/versions`;
    const replies = await Promise.all([1, 2, 3].map(() => modeler.post(path, { track, basedOn: 1 })));
    expect(replies.map(({ status }) => status).sort()).toEqual([201, 409, 409]);
  });

  it('is made once for one Idempotency-Key', async () => {
    const body = { name: 'Once only', track };
    const headers = { 'Idempotency-Key': 'the-same-intent' };
    const replies = await Promise.all([1, 2].map(() => modeler.post('/scenarios', body, headers)));
    expect(replies.map(({ status }) => status)).toEqual([201, 201]);
    expect((replies[0]!.body as ScenarioVersion).id).toBe((replies[1]!.body as ScenarioVersion).id);
  });

  it('needs a name nobody uses', async () => {
    const { name } = await create();
    const reply = await modeler.post('/scenarios', { name, track });
    expect([reply.status, problemOf(reply).code]).toEqual([409, 'conflict']);
  });

  it('leaves an entry in the audit log for each version', async () => {
    const { scenarioId, digest } = await create();
    await modeler.post(`/scenarios/${scenarioId}/versions`, { track, basedOn: 1 }).expect(201);
    const entries = await database.superUser('audit_entries').where({ object: `scenario ${scenarioId}` });
    expect(entries.map(({ action }) => action as string).sort()).toEqual([
      'scenario.created',
      'scenario.version_saved',
    ]);
    expect(entries[0]).toMatchObject({ actor_id: DUNE.people.modeler.id, details: { digest } });
  });

  it('can’t be changed in the database by the service', async () => {
    const { id } = await create();
    await expect(
      database.transact(DUNE.id, (tx) => tx('scenario_versions').where({ id }).update({ digest: 'x' })),
    ).rejects.toThrow('permission denied');
  });
});

describe('a track that isn’t saved', () => {
  it('names every fault at once, at its fix', async () => {
    const reply = await modeler.post('/scenarios', {
      name: 'Faulty',
      track: moved([fixAt(6, { centralPressureHpa: 28.6 }), fixAt(0, { centralPressureHpa: null, maxWindMs: null })]),
    });
    const { code, faults } = problemOf(reply);
    expect([reply.status, code]).toEqual([422, 'track_unreadable']);
    expect(faults.map((fault) => [fault.code, fault.path])).toEqual([
      ['TRACK-02', 'body.track.fixes.1'],
      ['TRACK-04', 'body.track.fixes.0'],
      ['TRACK-09', 'body.track.fixes.1'],
    ]);
  });

  it('is out of order, until the person consents to sorting', async () => {
    const mixed = moved([fixAt(6), fixAt(0), fixAt(12)]);
    const reply = await modeler.post('/scenarios', { name: 'Mixed', track: mixed });
    expect(problemOf(reply).faults.map(({ code }) => code)).toEqual(['TRACK-02']);
    const { resolution, track: kept } = await create({ track: mixed, sortByTime: true });
    expect(kept.fixes).toEqual([fixAt(0), fixAt(6), fixAt(12)]);
    expect(resolution.findings.map(({ code }) => code)).toContain('TRACK-16');
  });

  it('has no declared averaging period', async () => {
    const reply = await modeler.post('/scenarios', { name: 'Undeclared', track: { ...track, declarations: {} } });
    expect(reply.status).toBe(422);
    expect(problemOf(reply).faults[0]).toMatchObject({
      path: 'body.track.declarations.windAveragingS',
      message: expect.stringContaining('Declare how long the winds were averaged'),
    });
  });
});

describe('reading a text', () => {
  const best = readFileSync(new URL('../data/tracks/AL092022_IAN.txt', import.meta.url), 'utf8');
  it('gives fixes, conversions and findings without saving', async () => {
    const read = ReadTrackReply.parse((await modeler.post('/scenarios/read', { text: best }).expect(200)).body);
    expect(read).toMatchObject({ format: 'best-track', name: 'Ian (AL092022)', windAveragingS: 60 });
    expect(read.fixes).toHaveLength(40);
    const body = { track: { fixes: read.fixes, declarations: { windAveragingS: 60 } } };
    expect((await modeler.post('/scenarios/resolve', body).expect(200)).body).toMatchObject({ hemisphere: 'north' });
  });
  it('asks for the averaging period when the text doesn’t say', async () => {
    const text = 'time_utc,latitude,longitude,max_wind_kt\n2030-09-01 00:00,20,-60,80\n2030-09-01 06:00,21,-61,85';
    const read = ReadTrackReply.parse((await modeler.post('/scenarios/read', { text }).expect(200)).body);
    expect(read.windAveragingS).toBeNull();
    expect(read.findings).toMatchObject([{ code: 'TRACK-11', severity: 'refuse' }]);
  });
  it('takes nothing when a line can’t be read, and names the line', async () => {
    const reply = await modeler.post('/scenarios/read', { text: best.replace('27.7N', '27.7Q') });
    expect([reply.status, problemOf(reply).code]).toEqual([422, 'track_unreadable']);
    expect(problemOf(reply).faults).toMatchObject([{ path: 'line 32' }]);
  });
  it('counts every bad line and lists the first two hundred', async () => {
    const text = `AL012030, LONG, 1,\n${'not a fix\n'.repeat(1_000)}`;
    const problem = problemOf(await modeler.post('/scenarios/read', { text, format: 'best-track' }));
    expect(problem.detail).toContain('1000 lines or columns');
    expect(problem.faults).toHaveLength(200);
  });
  it('says what it can read when it is given something else', async () => {
    const reply = await modeler.post('/scenarios/read', { text: 'The storm moved north.' });
    expect(problemOf(reply).detail).toContain('neither best-track text');
  });
});

describe('who may see and change scenarios', () => {
  it('gives strangers the same “not found” as for what isn’t there', async () => {
    const { scenarioId } = await create();
    await stranger.get(`/scenarios/${scenarioId}`).expect(404);
    await stranger.post(`/scenarios/${scenarioId}/versions`, { track, basedOn: 1 }).expect(404);
    expect((await stranger.get('/scenarios').expect(200)).body).toEqual({ items: [], nextCursor: null });
  });
  it('lets auditors read only, and account admins nothing', async () => {
    const { scenarioId } = await create();
    const auditor = await signIn('auditor');
    await auditor.get(`/scenarios/${scenarioId}`).expect(200);
    expect(problemOf(await auditor.post('/scenarios', { name: 'x', track })).code).toBe('not_allowed');
    const admin = await signIn('admin');
    expect(problemOf(await admin.get('/scenarios')).code).toBe('not_allowed');
  });
});

it('lists every scenario once, newest change first, page by page', async () => {
  clock.pass(1_000);
  const { scenarioId } = await create();
  clock.pass(1_000);
  const { scenarioId: newest } = await create();
  clock.pass(1_000);
  await modeler.post(`/scenarios/${scenarioId}/versions`, { track, basedOn: 1 }).expect(201);
  const all = listScenarios.response.parse((await modeler.get('/scenarios?limit=500').expect(200)).body).items;
  expect(all.slice(0, 2).map(({ id, version }) => [id, version])).toEqual([
    [scenarioId, 2],
    [newest, 1],
  ]);
  const paged = [];
  for (let cursor: string | null = ''; cursor !== null;) {
    const query: string = cursor === '' ? '' : `&cursor=${cursor}`;
    const page = listScenarios.response.parse((await modeler.get(`/scenarios?limit=3${query}`).expect(200)).body);
    paged.push(...page.items);
    cursor = page.nextCursor;
  }
  expect(paged).toEqual(all);
});

it('gives runs the versions they ask for, in their order, of their organisation only', async () => {
  const [a, b] = [await create(), await create()];
  const reader = new ScenarioReader();
  const ids = [b.id, a.id, '00000000-0000-4000-8000-00000000dead'];
  const found = await database.transact(DUNE.id, (tx) => reader.versions(tx, DUNE.id, ids));
  expect(found.map(({ id, digest }) => [id, digest])).toEqual([
    [b.id, b.digest],
    [a.id, a.digest],
  ]);
  expect(found[0]).toMatchObject({ conversion: '10-min to 1-min wind × 1.05 (WMO/TD-1555, at sea)', asOf: null });
  expect(found[0]!.fixes[0]).toMatchObject({ centralPressurePa: 96_000, windAveragingS: 600 });
  expect(found[0]!.path).toEqual(b.resolution.path);
  expect(await database.transact(REEF.id, (tx) => reader.versions(tx, REEF.id, ids))).toEqual([]);
});

it('refuses a cursor that isn’t one of ours', async () => {
  for (const parts of [['x'], ['yesterday', 'me'], ['2030-09-01T00:00:00.000Z', "' or true --"]]) {
    const cursor = Buffer.from(JSON.stringify(parts)).toString('base64url');
    expect((await modeler.get(`/scenarios?cursor=${cursor}`)).status).toBe(422);
  }
});
