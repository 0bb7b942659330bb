import { describe, expect, it } from 'vitest';
import { Problem } from '#contract/errors.ts';
import { ScenarioVersion, listScenarios, type Fix, type Track } from '#contract/scenarios.ts';
import { VariantsReply, type Variant } from '#contract/variants.ts';
import { greatCircleDistance } from '#engine/geo/geodesy.ts';
import { ScenarioReader } from '../../api/features/scenarios/scenario-reader.ts';
import { createTestApp } from '../helpers/app.ts';
import { DUNE, REEF } from '../helpers/people.ts';

const { database, signIn } = await createTestApp();
const modeler = await signIn('modeler');
const underwriter = await signIn('underwriter');
const auditor = await signIn('auditor');
const stranger = await signIn('modeler', { org: REEF });

const fixAt = (hour: number, over: Partial<Fix> = {}): Fix => ({
  time: new Date(Date.UTC(2030, 8, 1, hour)).toISOString(),
  // From the Gulf of Mexico northward onto the coast of Florida, which it crosses near 30.1 N, 85.7 W.
  latitude: 28 + hour / 8,
  longitude: -85.7,
  centralPressureHpa: 950,
  ambientPressureHpa: 1010,
  maxWindMs: 50,
  radiusOfMaxWindM: 35_000,
  radius34KtM: [200_000, 180_000, 120_000, 160_000],
  radius50KtM: null,
  radius64KtM: null,
  ringWidthFraction: null,
  eyeVorticityRatio: null,
  hoursInland: null,
  ...over,
});
const gulf: Track = {
  fixes: [0, 6, 12, 18, 24, 30].map((hour) => fixAt(hour)),
  declarations: { windAveragingS: 60, source: 'Made up for a test', asOf: null },
};

let named = 0;
const create = async (track: Track = gulf, name = `Varrow ${++named}`): Promise<ScenarioVersion> =>
  ScenarioVersion.parse((await modeler.post('/scenarios', { name, track }).expect(201)).body);
const preview = async (scenario: ScenarioVersion, body: object): Promise<VariantsReply> =>
  VariantsReply.parse(
    (await underwriter.post(`/scenarios/${scenario.scenarioId}/variants/preview`, body).expect(200)).body,
  );
const save = async (scenario: ScenarioVersion, body: object): Promise<VariantsReply> =>
  VariantsReply.parse((await modeler.post(`/scenarios/${scenario.scenarioId}/variants`, body).expect(201)).body);
const saved = async ({ scenarioId }: Variant): Promise<ScenarioVersion> =>
  ScenarioVersion.parse((await modeler.get(`/scenarios/${scenarioId}`).expect(200)).body);
const problemOf = (reply: { status: number; body: unknown }) => Problem.parse(reply.body);

const RIGHT = { offsetKm: 40 };
const ENSEMBLE = { seed: 7, members: 10, offsetKm: 40, headingDeg: 4, windLog: 0.06, speedLog: 0.1, radiusLog: 0.15 };

describe('a preview of variants', () => {
  it('shows the track and its changed copies with where, when and how strong they come ashore; saves nothing', async () => {
    const scenario = await create();
    const reply = await preview(scenario, { changes: [RIGHT, { windFactor: 1.1 }, { speedFactor: 2 }] });
    expect(reply.base).toMatchObject({ name: scenario.name, scenarioId: scenario.scenarioId });
    expect(reply.variants.map(({ name, scenarioId }) => [name, scenarioId])).toEqual([
      [`${scenario.name}, 40 km right`, null],
      [`${scenario.name}, wind +10 %`, null],
      [`${scenario.name}, speed +100 %`, null],
    ]);
    const [right, strong, fast] = reply.variants;
    const ashore = reply.base.landfall!;
    // The coast of the panhandle, by any map: 30.0–30.3 N at 85.7 W; the centre moves 1° of latitude in 8 h.
    expect(ashore.latitude).toBeGreaterThan(29.9);
    expect(ashore.latitude).toBeLessThan(30.4);
    expect(Date.parse(ashore.time) - Date.UTC(2030, 8, 1)).toBeCloseTo((ashore.latitude - 28) * 8 * 3_600_000, -5);
    expect(greatCircleDistance(ashore, right!.landfall!)).toBeGreaterThan(35_000);
    expect(right!.landfall!.longitude).toBeGreaterThan(ashore.longitude);
    expect(strong!.maxWindMs).toBeGreaterThan(reply.base.maxWindMs * 1.05);
    expect(strong!.landfall).toMatchObject({ time: ashore.time, latitude: ashore.latitude });
    const start = Date.UTC(2030, 8, 1);
    expect((Date.parse(fast!.landfall!.time) - start) / (Date.parse(ashore.time) - start)).toBeCloseTo(0.5, 4);
    expect(reply.notices.map(({ code }) => code)).toEqual(
      expect.arrayContaining(['chosen-spread', 'intensity-by-time', 'life-safety']),
    );
    const { items } = listScenarios.response.parse((await modeler.get('/scenarios?limit=500').expect(200)).body);
    expect(items.filter(({ name }) => name.startsWith(scenario.name))).toHaveLength(1);
  });

  it('is the same for the same seed to the last bit, another for another', async () => {
    const scenario = await create();
    const [a, b, c] = [
      await preview(scenario, { ensemble: ENSEMBLE }),
      await preview(scenario, { ensemble: ENSEMBLE }),
      await preview(scenario, { ensemble: { ...ENSEMBLE, seed: 8 } }),
    ];
    expect(a.variants).toHaveLength(10);
    expect(a).toEqual(b);
    expect(c.variants.map(({ change }) => change)).not.toEqual(a.variants.map(({ change }) => change));
    expect(a.variants[2]!.name).toBe(`${scenario.name}, member 3 of 10, seed 7`);
  });

  it('keeps lines side by side across 180°', async () => {
    const across = await create({
      ...gulf,
      fixes: [0, 6, 12].map((hour) => fixAt(hour, { latitude: -18 + hour / 8, longitude: 179.9 })),
    });
    const { base, variants } = await preview(across, { changes: [RIGHT, { offsetKm: -40 }] });
    for (const { path } of variants) {
      expect(
        path.every(([longitude], i) => Math.abs(longitude - base.path[Math.min(i, base.path.length - 1)]![0]) < 1),
      ).toBe(true);
    }
    // Northward: to the right is east, also in the south.
    expect(variants[0]!.path[0]![0]).toBeGreaterThan(base.path[0]![0]);
    expect(variants[1]!.path[0]![0]).toBeLessThan(base.path[0]![0]);
  });

  it('can be of an earlier version', async () => {
    const scenario = await create();
    const stronger = { ...gulf, fixes: gulf.fixes.map((fix) => ({ ...fix, centralPressureHpa: 930 })) };
    await modeler.post(`/scenarios/${scenario.scenarioId}/versions`, { track: stronger, basedOn: 1 }).expect(201);
    const [old, latest] = [
      await preview(scenario, { version: 1, changes: [RIGHT] }),
      await preview(scenario, { changes: [RIGHT] }),
    ];
    expect(latest.base.maxWindMs).toBeGreaterThan(old.base.maxWindMs);
  });

  it('says where a sharp turn brings the offset nearer, and where radii were filled', async () => {
    const bent = await create({
      ...gulf,
      fixes: gulf.fixes.map((fix, i) => ({
        ...fix,
        radiusOfMaxWindM: null,
        ...(i < 3 ? {} : { latitude: 29.5, longitude: -85.7 + (i - 2) * 0.7 }),
      })),
    });
    const { notices } = await preview(bent, { changes: [{ offsetKm: 40, radiusFactor: 1.2 }] });
    expect(notices.find(({ code }) => code === 'sharp-turn')!.text).toMatch(/turns by \d+° at fix 3/);
    expect(notices.map(({ code }) => code)).toContain('radius-filled');
  });

  it('refuses what would be no track, naming the variant, and what changes nothing', async () => {
    const scenario = await create({ ...gulf, fixes: gulf.fixes.map((fix) => ({ ...fix, centralPressureHpa: 900 })) });
    const path = `/scenarios/${scenario.scenarioId}/variants/preview`;
    const tooDeep = await underwriter.post(path, { changes: [RIGHT, { windFactor: 1.5 }] });
    expect([tooDeep.status, problemOf(tooDeep).code]).toEqual([422, 'invalid_request']);
    expect(problemOf(tooDeep).faults[0]).toMatchObject({ path: 'body.changes.1' });
    expect(problemOf(tooDeep).faults[0]!.message).toContain('wind +50 %');
    for (const body of [
      { changes: [{}] },
      { ensemble: { seed: 1, members: 3 } },
      { changes: [RIGHT], ensemble: ENSEMBLE },
      {},
      { changes: [{ offsetKm: 501 }] },
    ]) {
      expect((await underwriter.post(path, body)).status).toBe(422);
    }
  });
});

describe('a saved variant', () => {
  it('is a scenario of its own that knows what it was made from', async () => {
    const base = await create();
    const { variants } = await save(base, { changes: [RIGHT] });
    const variant = await saved(variants[0]!);
    expect(variant).toMatchObject({
      name: `${base.name}, 40 km right`,
      number: 1,
      derivation: {
        ...{ scenarioId: base.scenarioId, name: base.name, version: 1, ensemble: null },
        change: { offsetKm: 40, headingDeg: 0, windFactor: 1, speedFactor: 1, radiusFactor: 1 },
      },
    });
    expect(variant.digest).not.toBe(base.digest);
    variant.track.fixes.forEach((fix, i) => {
      const was = base.track.fixes[i]!;
      expect(greatCircleDistance(fix, was)).toBeCloseTo(40_000, -1);
      // What isn't named stays as entered.
      expect(fix).toEqual({ ...was, latitude: fix.latitude, longitude: fix.longitude });
    });
    const { items } = listScenarios.response.parse((await modeler.get('/scenarios?limit=500').expect(200)).body);
    expect(items.find(({ id }) => id === variant.scenarioId)).toMatchObject({
      derivation: variant.derivation,
      description: `Made from ${base.name}, version 1: 40 km right.`,
    });
  });

  it('says so to runs, also after it was edited', async () => {
    const base = await create();
    const { variants } = await save(base, { ensemble: ENSEMBLE });
    const first = await saved(variants[2]!);
    const second = ScenarioVersion.parse(
      (await modeler.post(`/scenarios/${first.scenarioId}/versions`, { track: base.track, basedOn: 1 }).expect(201))
        .body,
    );
    const found = await database.transact(DUNE.id, (tx) =>
      new ScenarioReader().versions(tx, DUNE.id, [first.id, second.id, base.id]),
    );
    const made = `Made up for a test. Made from ${base.name}, version 1: member 3 of 10, seed 7: `;
    expect(found[0]!.provenance.startsWith(made)).toBe(true);
    expect(found[0]!.provenance).not.toContain('edited');
    expect(found[1]!.provenance).toContain('edited since');
    expect(found[2]!.provenance).toBe('Made up for a test');
  });

  it('keeps the seed, the spread and the member, and the same digits for the same seed', async () => {
    const base = await create();
    const [a, b] = [await save(base, { ensemble: ENSEMBLE }), await save(base, { ensemble: ENSEMBLE })];
    expect(b.variants[0]!.name).toBe(`${a.variants[0]!.name} (2)`);
    const [one, two] = [await saved(a.variants[9]!), await saved(b.variants[9]!)];
    expect(one.derivation!.ensemble).toEqual({ seed: 7, member: 10, members: 10, spread: ENSEMBLE });
    expect(one.digest).toBe(two.digest);
    const shown = await preview(base, { ensemble: ENSEMBLE });
    expect(shown.variants.map(({ change }) => change)).toEqual(a.variants.map(({ change }) => change));
  });

  it('gets a number when its name is taken, and keeps the change in a name that is too long', async () => {
    const base = await create(gulf, `Varrow ${'long '.repeat(22)}x`);
    const names = [];
    for (let i = 0; i < 3; i++) names.push((await save(base, { changes: [RIGHT] })).variants[0]!.name);
    expect(new Set(names).size).toBe(3);
    expect(names.every((name) => name.length <= 120 && name.includes('…, 40 km right'))).toBe(true);
    expect(names[2]).toMatch(/\(3\)$/);
  });

  it('is made once for one Idempotency-Key, all members or none', async () => {
    const base = await create();
    const path = `/scenarios/${base.scenarioId}/variants`;
    const headers = { 'Idempotency-Key': 'the-same-variants' };
    const replies = await Promise.all([1, 2].map(() => modeler.post(path, { changes: [RIGHT] }, headers)));
    expect(replies.map(({ status }) => status)).toEqual([201, 201]);
    const [first, second] = replies.map(({ body }) => VariantsReply.parse(body).variants[0]!.scenarioId);
    expect(first).toBe(second);
    const deep = await create({ ...gulf, fixes: gulf.fixes.map((fix) => ({ ...fix, centralPressureHpa: 900 })) });
    await modeler.post(`/scenarios/${deep.scenarioId}/variants`, { changes: [RIGHT, { windFactor: 1.5 }] }).expect(422);
    const rows = await database.superUser('scenarios').where('name', 'like', `${deep.name},%`);
    expect(rows).toEqual([]);
  });

  it('leaves an entry in the audit log with what it was made from', async () => {
    const { variants } = await save(await create(), { changes: [RIGHT] });
    const { scenarioId, digest, derivation } = await saved(variants[0]!);
    const [entry] = await database.superUser('audit_entries').where({ object: `scenario ${scenarioId}` });
    expect(entry).toMatchObject({
      ...{ action: 'scenario.created', actor_id: DUNE.people.modeler.id },
      details: { digest, derivation },
    });
  });

  it('is for people who may write tracks, in the organisation the track belongs to', async () => {
    const base = await create();
    const path = `/scenarios/${base.scenarioId}/variants`;
    for (const address of [path, `${path}/preview`]) {
      expect((await auditor.post(address, { changes: [RIGHT] })).status).toBe(403);
      const foreign = await stranger.post(address, { changes: [RIGHT] });
      expect([foreign.status, problemOf(foreign).code]).toEqual([404, 'not_found']);
    }
    await underwriter.post(path, { changes: [RIGHT] }).expect(201);
    expect((await modeler.post(path, { version: 9, changes: [RIGHT] })).status).toBe(404);
  });

  it('keeps the issue time of the advisory it was made from', async () => {
    const advisory = { ...gulf, declarations: { ...gulf.declarations, asOf: '2026-11-30T00:00:00.000Z' } };
    const { variants } = await save(await create(advisory), { changes: [RIGHT] });
    const variant = await saved(variants[0]!);
    expect(variant.track.declarations.asOf).toBe('2026-11-30T00:00:00.000Z');
    expect(variant.stale).not.toBeNull();
  });
});
