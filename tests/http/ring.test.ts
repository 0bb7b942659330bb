import { spawnSync } from 'node:child_process';
import { describe, expect, it } from 'vitest';
import { Problem } from '#contract/errors.ts';
import { RingReply } from '#contract/rings.ts';
import { createTestApp } from '../helpers/app.ts';
import { expectPrinted } from '../helpers/printed.ts';

const { signIn } = await createTestApp();
const browser = await signIn('modeler');
const RING = {
  maxWindMs: 60,
  radiusOfMaxWindM: 30000,
  ringWidthFraction: 0.35,
  eyeVorticityRatio: 0.2,
  hoursInland: 0,
};

describe('POST /api/v1/rings', () => {
  it('gives the worked ring, computed from the published formula', async () => {
    const reply = RingReply.parse((await browser.post('/rings', RING).expect(200)).body);
    expect([reply.wavenumber, reply.polygon]).toEqual([4, 'square']);
    expectPrinted(reply.amplitude, '0.12558');
    expectPrinted(reply.growthPerS! * 1e4, '5.4351');
    expectPrinted(reply.eFoldS! / 60, '30.67');
    expectPrinted(reply.patternRadPerS! * 1e3, '1.20505');
    expectPrinted(reply.patternPeriodS! / 60, '86.90');
    expectPrinted(reply.passIntervalS! / 60, '21.73');
    expectPrinted(reply.orbitRadiusM / 1000, '25.30');
    expectPrinted(reply.coreRadiusM! / 1000, '11.40');
    expectPrinted(reply.circulationM2PerS! / 1e6, '2.589');
    expect(reply.lifetimeS / 60).toBeCloseTo(125, 10);
  });
  it('says when edge waves lock: the inner one runs ahead of its flow, the outer one behind', async () => {
    const { sharpModes } = RingReply.parse((await browser.post('/rings', RING).expect(200)).body);
    for (const mode of sharpModes) {
      // Kelvin's edge waves: each runs against the vorticity's fall, seen from the flow.
      expect(mode.innerWaveRadPerS).toBeGreaterThan(mode.innerFlowRadPerS);
      expect(mode.outerWaveRadPerS).toBeLessThan(mode.outerFlowRadPerS);
      expect(mode.locked).toBe(mode.growthPerS > 0);
      expect(Array.isArray(mode.frequencyRadPerS)).toBe(!mode.locked);
    }
    // A ring is shifted or made elliptic, but not broken, by waves 1 and 2.
    expect(sharpModes.slice(0, 2).map(({ locked }) => locked)).toEqual([false, false]);
    expect(sharpModes[3]!.locked).toBe(true);
  });
  it('tells of a thick ring round a filled eye that nothing grows', async () => {
    const reply = RingReply.parse(
      (await browser.post('/rings', { ...RING, ringWidthFraction: 0.45, eyeVorticityRatio: 0.6 }).expect(200)).body,
    );
    expect([reply.wavenumber, reply.polygon, reply.growthPerS, reply.patternPeriodS]).toEqual([null, null, null, null]);
    expect(reply.amplitude).toBe(0);
  });
  it('names what is wrong with a bad ring, with its value and its range', async () => {
    const bad = { maxWindMs: null, radiusOfMaxWindM: 300_000, ringWidthFraction: -0.2, eyeVorticityRatio: 1.4 };
    const problem = Problem.parse((await browser.post('/rings', bad).expect(422)).body);
    expect(problem.faults?.map(({ path, message }) => `${path}: ${message}`)).toEqual([
      'body.maxWindMs: The maximum wind is null. Give 10 to 120 m/s.',
      'body.radiusOfMaxWindM: The radius of maximum wind is 300000. Give 2000 to 200000 m.',
      'body.ringWidthFraction: The ring width is -0.2. Give 0.05 to 1 of the radius of maximum wind.',
      'body.eyeVorticityRatio: The eye’s vorticity over the average is 1.4. Give 0 to 1.',
    ]);
  });
  it('answers as the command line does, in every digit', async () => {
    const { status, stdout } = spawnSync('npm', ['run', '-s', 'ring'], {
      input: JSON.stringify(RING),
      encoding: 'utf8',
    });
    expect(status).toBe(0);
    expect(JSON.parse(stdout)).toEqual((await browser.post('/rings', RING).expect(200)).body);
  });
});
