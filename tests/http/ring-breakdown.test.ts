import { describe, expect, it } from 'vitest';
import { Problem } from '#contract/errors.ts';
import { BreakdownReply } from '#contract/rings.ts';
import { ScenarioVersion } from '#contract/scenarios.ts';
import { breakdown, DEFAULT_BREAKDOWN } from '#engine/ring/breakdown.ts';
import type { EnginePool } from '../../api/compute/pool.ts';
import { BreakdownService } from '../../api/features/rings/breakdown-service.ts';
import { StudyGate } from '../../api/features/studies/study-gate.ts';
import { createTestApp } from '../helpers/app.ts';
import { inlinePool } from '../helpers/inline-pool.ts';
import { DUNE } from '../helpers/people.ts';
import { gulfTrack } from '../helpers/run-fixture.ts';

const { database, signIn } = await createTestApp();
const modeler = await signIn('modeler');
const RING = { maxWindMs: 60, radiusOfMaxWindM: 30_000, ringWidthFraction: 0.35, eyeVorticityRatio: 0.2 };
const SHORT = { ...RING, points: 64, durationS: 3600, frameStepS: 1800 } as const;
const messagesOf = (body: unknown) =>
  (Problem.parse(body).faults ?? []).map(({ path, message }) => `${path}: ${message}`);

describe('POST /rings/breakdown', () => {
  it('gives the numbers of the source the browser runs, frame by frame, in every digit', async () => {
    const reply = BreakdownReply.parse(
      (await modeler.post('/rings/breakdown', { ...SHORT, frames: true }).expect(200)).body,
    );
    const own = [
      ...breakdown({
        ...DEFAULT_BREAKDOWN,
        maxWind: 60,
        radiusOfMaxWind: 30_000,
        widthFraction: 0.35,
        eyeRatio: 0.2,
        points: 64,
        durationS: 3600,
        frameStepS: 1800,
      }),
    ];
    expect(reply.frames.map(({ timeS }) => timeS)).toEqual([0, 1800, 3600]);
    expect(reply.sideM).toBe(DEFAULT_BREAKDOWN.sideInRadii * 30_000);
    reply.frames.forEach((frame, k) => {
      const { vorticity, maxWind, meanMaxWind, minPressure, vortices, energyShare, enstrophyShare } = own[k]!;
      expect(frame.vorticityPerS).toEqual([...vorticity]);
      expect(frame).toMatchObject({
        ...{ maxWindMs: maxWind, meanMaxWindMs: meanMaxWind, minPressurePa: minPressure },
        ...{ vortices, energyShare, enstrophyShare },
      });
    });
    expect(reply.notices.map(({ code }) => code)).toContain('uncertainty');
  });

  it('sends the measures alone when the vorticity isn’t asked for', async () => {
    const reply = BreakdownReply.parse((await modeler.post('/rings/breakdown', SHORT).expect(200)).body);
    expect(reply.frames.map(({ vorticityPerS }) => vorticityPerS.length)).toEqual([0, 0, 0]);
    expect(reply.frames.every(({ circulationResidual }) => Math.abs(circulationResidual) < 1e-12)).toBe(true);
  });

  it('names what is wrong with a bad ring, with its value and its range', async () => {
    const bad = { maxWindMs: 130, radiusOfMaxWindM: 300_000, ringWidthFraction: -0.1, eyeVorticityRatio: 1.2 };
    const reply = await modeler.post('/rings/breakdown', { ...SHORT, ...bad }).expect(422);
    expect(messagesOf(reply.body).sort()).toEqual([
      'body.eyeVorticityRatio: The eye’s vorticity over the average is 1.2. Give 0 to 0.9.',
      'body.maxWindMs: The maximum wind is 130. Give 10 to 110 m/s.',
      'body.radiusOfMaxWindM: The radius of maximum wind is 300000. Give 2000 to 200000 m.',
      'body.ringWidthFraction: The ring width is -0.1. Give 0.1 to 0.45 of the radius of maximum wind.',
    ]);
  });

  it('refuses too many frames, too much vorticity and too long a computation, each by its number', async () => {
    const refused = async (more: object) =>
      messagesOf((await modeler.post('/rings/breakdown', { ...RING, ...more }).expect(422)).body);
    expect(await refused({ durationS: 86_400, frameStepS: 60 })).toEqual([
      'body.frameStepS: The time between frames is 60 s: 1441 frames. Give 216 s or more for 86400 s.',
    ]);
    expect(await refused({ durationS: 21_600, frameStepS: 600, frames: true })).toEqual([
      'body.frames: Vorticity was asked for in 37 frames of 128 points. Give at most 25 frames of at most 128 points, or leave the vorticity out.',
    ]);
    const [slow] = await refused({ points: 256, durationS: 86_400, frameStepS: 3600 });
    expect(slow).toMatch(/^body\.durationS: The duration is 86400 s at 256 points\. Give at most \d+ s for this ring/);
  });

  it('is closed to auditors and admins', async () => {
    for (const role of ['auditor', 'admin'] as const)
      await (await signIn(role)).post('/rings/breakdown', SHORT).expect(403);
  });

  it('stops between frames when nobody waits any more, and gives its place to the next', async () => {
    const leaving = new AbortController();
    const pool: EnginePool = inlinePool({ before: () => leaving.abort(new Error('left')) });
    const service = new BreakdownService({ pool, gate: new StudyGate(1, 1, 1), engineVersion: () => 'e' });
    const request = { ...SHORT, disturbance: 0.01, seed: 1, relaxationS: null, frames: false };
    await expect(service.breakdown(request, leaving.signal)).rejects.toThrow('stopped');
    const next = new BreakdownService({ pool: inlinePool(), gate: new StudyGate(1, 1, 1), engineVersion: () => 'e' });
    expect((await next.breakdown(request, new AbortController().signal)).frames).toHaveLength(3);
  });
});

describe('POST /scenarios/:id/ring', () => {
  const create = async (name: string) =>
    ScenarioVersion.parse((await modeler.post('/scenarios', { name, track: gulfTrack() }).expect(201)).body);
  const ring = { ringWidthFraction: 0.25, eyeVorticityRatio: 0.1 };

  it('sets the ring at every fix of the next version and leaves the track and the version before alone', async () => {
    const first = await create('Ring one');
    const reply = await modeler.post(`/scenarios/${first.scenarioId}/ring`, { basedOn: 1, ...ring }).expect(201);
    const second = ScenarioVersion.parse(reply.body);
    expect(second).toMatchObject({ number: 2, name: 'Ring one', createdBy: DUNE.people.modeler.name });
    expect(second.track).toEqual({ ...first.track, fixes: first.track.fixes.map((fix) => ({ ...fix, ...ring })) });
    expect(second.digest).not.toBe(first.digest);
    const kept = await database
      .superUser('scenario_versions')
      .where({ scenario_id: first.scenarioId, number: 1 })
      .first();
    expect(kept.digest).toBe(first.digest);
    const [entry] = await database
      .superUser('audit_entries')
      .where({ action: 'scenario.ring_set', object: `scenario ${first.scenarioId}` });
    expect(entry.details).toMatchObject({ version: 2, digest: second.digest });
  });

  it('refuses a ring based on an old version, and one out of range', async () => {
    const { scenarioId } = await create('Ring two');
    await modeler.post(`/scenarios/${scenarioId}/ring`, { basedOn: 1, ...ring }).expect(201);
    const late = await modeler.post(`/scenarios/${scenarioId}/ring`, { basedOn: 1, ...ring }).expect(409);
    expect(Problem.parse(late.body).detail).toContain('saved version 2 meanwhile');
    const bad = await modeler
      .post(`/scenarios/${scenarioId}/ring`, { basedOn: 2, ringWidthFraction: 0.6, eyeVorticityRatio: 0.1 })
      .expect(422);
    expect(messagesOf(bad.body)).toEqual([
      'body.ringWidthFraction: The ring width is 0.6. Give 0.1 to 0.45 of the radius of maximum wind.',
    ]);
  });
});
