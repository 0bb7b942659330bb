import { describe, expect, it } from 'vitest';
import { EvaluationReply, type EvaluationBody } from '#contract/evaluations.ts';
import { Problem } from '#contract/errors.ts';
import type { VortexObservation } from '#contract/observed-vortices.ts';
import { ScenarioVersion, type Fix, type Track } from '#contract/scenarios.ts';
import { windField } from '#contract/studies.ts';
import { createTestApp } from '../helpers/app.ts';
import { workedRequest } from '../helpers/evaluation-request.ts';

const { signIn } = await createTestApp();
const modeler = await signIn('modeler');

const at = (hour: number) => new Date(Date.UTC(2031, 8, 1, hour)).toISOString();
const fixAt = (hour: number): Fix => ({
  time: at(hour),
  latitude: 20 + hour / 10,
  longitude: -60,
  centralPressureHpa: 930,
  ambientPressureHpa: null,
  maxWindMs: null,
  radiusOfMaxWindM: 30_000,
  radius34KtM: null,
  radius50KtM: null,
  radius64KtM: null,
  ringWidthFraction: null,
  eyeVorticityRatio: null,
  hoursInland: null,
});
const track: Track = {
  fixes: [fixAt(0), fixAt(6), fixAt(12)],
  declarations: { windAveragingS: 60, source: 'Made up for a test', asOf: null },
};
const pentagon: VortexObservation = {
  kind: 'maxima',
  time: at(7),
  azimuthsDeg: [10, 82, 154, 226, 298],
  uncertaintyDeg: 8,
};
const ellipse: VortexObservation = {
  kind: 'ellipse',
  time: at(8),
  longAxisBearingDeg: 40,
  majorM: 30_000,
  minorM: 20_000,
  rotationPeriodMinutes: 144,
  uncertaintyDeg: 10,
};
let named = 0;
const post = (vortices: unknown) => {
  named += 1;
  return modeler.post('/scenarios', { name: `Seen ${named}`, track: { ...track, vortices } });
};

describe('a track with observed vortices', () => {
  it('is saved with them, says what they set, and has a digest of its own', async () => {
    const saved = ScenarioVersion.parse((await post([pentagon]).expect(201)).body);
    expect(saved.track.vortices).toEqual([pentagon]);
    expect(saved.resolution.wavenumber).toBe(5);
    const said = saved.resolution.findings.filter(({ code }) => code === 'TRACK-20').map(({ text }) => text);
    expect(said.join(' ')).toContain('Conditioned on 5 observed vortices at 2031-09-01 07:00 UTC');
    expect(Object.values(saved.resolution.fixes[0]!.filled).join(' ')).toContain('so that 5 vortices grow');
    const again = ScenarioVersion.parse((await modeler.get(`/scenarios/${saved.scenarioId}`).expect(200)).body);
    expect(again).toEqual(saved);
    const without = ScenarioVersion.parse((await post([]).expect(201)).body);
    const leftOut = ScenarioVersion.parse((await post(undefined).expect(201)).body);
    expect(without.digest).toBe(leftOut.digest);
    expect(saved.digest).not.toBe(without.digest);
    const other = ScenarioVersion.parse((await post([{ ...pentagon, uncertaintyDeg: 9 }]).expect(201)).body);
    expect(other.digest).not.toBe(saved.digest);
  });
  it('is refused with an observation outside it or out of range', async () => {
    const outside = Problem.parse((await post([{ ...pentagon, time: at(13) }]).expect(422)).body);
    expect(outside.detail).toContain('outside the track');
    for (const wrong of [
      { azimuthsDeg: [10] },
      { azimuthsDeg: [10, 370] },
      { uncertaintyDeg: 0 },
      { ...ellipse, minorM: 31_000 },
      { ...ellipse, rotationPeriodMinutes: 5 },
    ]) {
      await post([{ ...pentagon, ...wrong }]).expect(422);
    }
    await post(Array.from({ length: 21 }, () => pentagon)).expect(422);
  });
  it('labels what is studied of it', async () => {
    const { scenarioId } = ScenarioVersion.parse((await post([ellipse]).expect(201)).body);
    const reply = await modeler
      .post(`/scenarios/${scenarioId}/wind-field`, { time: at(8), settings: {}, halfWidthM: 100_000, points: 21 })
      .expect(200);
    const { notices } = windField.response.parse(reply.body);
    expect(notices.find(({ code }) => code === 'conditioned-on-observation')!.text).toContain('2031-09-01 08:00 UTC');
  });
});

describe('an evaluation', () => {
  const evaluate = (body: EvaluationBody) => modeler.post('/evaluations', body);

  it('takes observed vortices beside the track and says so', async () => {
    const body = workedRequest();
    const plain = EvaluationReply.parse((await evaluate(body).expect(200)).body);
    const seen = EvaluationReply.parse(
      (await evaluate({ ...body, vortexObservations: [{ ...pentagon, time: at(13) }] }).expect(200)).body,
    );
    expect(plain.storm.wavenumber).toBe(4);
    expect(seen.storm.wavenumber).toBe(5);
    expect(seen.sites[0]!.plain).toEqual(plain.sites[0]!.plain);
    expect(seen.sites[0]!.enhanced).not.toEqual(plain.sites[0]!.enhanced);
    expect(seen.notices.map(({ code }) => code)).toContain('conditioned-on-observation');
    const none = EvaluationReply.parse((await evaluate({ ...body, vortexObservations: [] }).expect(200)).body);
    expect(none).toEqual(plain);
  });
  it('names the observation at fault', async () => {
    const reply = await evaluate({
      ...workedRequest(),
      vortexObservations: [pentagon, { ...pentagon, time: at(25) }],
    }).expect(422);
    const { faults } = Problem.parse(reply.body);
    expect(faults).toEqual([
      expect.objectContaining({ path: expect.stringMatching(/vortexObservations\.1\.time$/) as string }),
    ]);
  });
});
