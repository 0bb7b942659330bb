import { spawnSync } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import { EvaluationReply, EvaluationRequest, type EvaluationBody } from '#contract/evaluations.ts';
import type { Problem } from '#contract/errors.ts';
import { WIND_CHOICES } from '#contract/wind-choice-catalogue.ts';
import { engineVersion } from '../../api/compute/engine-version.ts';
import { landIndex } from '../../api/compute/land.ts';
import type { AppError } from '../../api/errors.ts';
import { EvaluationService } from '../../api/features/evaluations/evaluation-service.ts';
import { workedRequest } from '../helpers/evaluation-request.ts';
import { expectPrinted } from '../helpers/printed.ts';

const service = new EvaluationService(landIndex, engineVersion);
const evaluate = (body: EvaluationBody) => service.evaluate(EvaluationRequest.parse(body));
const faultsOf = (body: unknown) =>
  EvaluationRequest.safeParse(body).error!.issues.map(({ path }) => path.map(String).join('.'));

describe('an evaluation', () => {
  it('gives the worked example, computed from the published formulas', () => {
    const reply = EvaluationReply.parse(evaluate(workedRequest()));
    const s2 = reply.sites[1]!;
    expectPrinted(s2.plain!.gustMs, '54.854776');
    expectPrinted(s2.enhanced!.meanMs, '56.165036');
    expect(s2.plain!.time).toBe('2031-09-01T15:17:00.000Z');
    expectPrinted(s2.loss!.groundUpPlain, '42145.05');
    expectPrinted(s2.loss!.grossMean, '40209.92');
    expect(reply.storm.wavenumber).toBe(4);
    expectPrinted(reply.storm.fixes[2]!.maxWindMs, '49.444250');
    expectPrinted(reply.storm.fixes[0]!.patternRadPerS!, '6.43554998e-4');
    expect(reply.storm.fixes[0]!.reportedMaxWindMs).toBe(50);
    expect(reply.event!.grossPlain).toBeCloseTo(128644.28, 1);
    expect(reply.event!.grossMean).toBeCloseTo(152405.02, 1);
    expect(reply.event!.grossP5).toBeCloseTo(139601.48, 1);
    expect(reply.event!.grossP50).toBeCloseTo(148173.09, 1);
    expect(reply.event!.grossP95).toBeCloseTo(184540.43, 1);
  });
  it('leaves loss out without a value, and the event without any', () => {
    const body = workedRequest();
    delete body.sites[0]!.value;
    expect(evaluate(body).sites[0]!.loss).toBeNull();
    expect(evaluate(body).event).not.toBeNull();
    for (const site of body.sites) site.value = null;
    expect(evaluate(body).event).toBeNull();
  });
  it('gives the same bits with every default named, and takes every other value', () => {
    const left = evaluate(workedRequest());
    const named = Object.fromEntries(WIND_CHOICES.map(({ key, values }) => [key, values[0]!.value]));
    expect(evaluate({ ...workedRequest(), options: named })).toEqual(left);
    for (const { key, values } of WIND_CHOICES) {
      for (const { value } of values.slice(1)) {
        const { sites } = evaluate({ ...workedRequest(), options: { [key]: value } });
        for (const { plain } of sites) expect([key, value, plain!.gustMs > 0]).toEqual([key, value, true]);
      }
    }
    expect(evaluate(workedRequest())).toEqual(left);
  });
  it('works out a hill after ASCE 7, and refuses a factor beside it', () => {
    // S4 of the worked example stands on this ridge; its factor is computed from the published formula: 1.192613.
    const body = workedRequest();
    const factor = body.sites[3]!.topographicFactor;
    const hill = { shape: 'ridge', heightM: 20, halfLengthM: 100, distanceM: 0, exposure: 'B' } as const;
    const given = evaluate(body).sites[3]!.plain!.gustMs;
    body.sites[3] = { ...body.sites[3]!, topographicFactor: null, hill };
    const { plain, filled } = evaluate(body).sites[3]!;
    expect(plain!.gustMs).toBeCloseTo(given, 6);
    expect(filled.topographicFactor).toBe('1.193, ASCE 7, ridge');
    body.sites[3] = { ...body.sites[3]!, topographicFactor: factor };
    expect(faultsOf(body)).toEqual(['sites.3.hill']);
    body.sites[3] = { ...body.sites[3]!, latitude: 99, hill: { ...hill, halfLengthM: 0 } };
    expect(faultsOf(body).sort()).toEqual(['sites.3.hill', 'sites.3.hill.halfLengthM', 'sites.3.latitude']);
  });
  it('equals plain in every enhanced field with the layer off', () => {
    for (const { plain, enhanced } of evaluate({ ...workedRequest(), options: { mesovortices: false } }).sites) {
      for (const value of Object.values(enhanced!)) expect(value).toBe(plain!.gustMs);
    }
  });
  it('says which anchor holds, what was assumed, and which sites it did not score', () => {
    const body = workedRequest();
    delete body.track[1]!.windAveragingSeconds;
    body.sites.push({ siteRef: 'far', latitude: 51, longitude: 7 });
    const { notices, sites } = evaluate(body);
    expect(notices.find(({ code }) => code === 'anchor')!.text).toContain('mean');
    expect(notices.some(({ code }) => code === 'averaging-assumed')).toBe(true);
    expect(notices.find(({ code }) => code === 'out-of-reach')!.text).toContain('far');
    expect(notices.some(({ code }) => code === 'exploratory')).toBe(true);
    const far = sites.at(-1)!;
    expect(far).toMatchObject({ reach: 'out-of-reach', plain: null, enhanced: null, loss: null });
    expect(far.filled.roughnessLengthM).toContain('open country');
  });
  it('takes fetch and hours inland from the land polygons where they are left out', () => {
    // A made-up storm that runs north over southern Florida.
    const hours = [0, 6, 12, 18];
    const body: EvaluationBody = {
      track: hours.map((hour) => ({
        time: new Date(Date.UTC(2031, 8, 1, hour)).toISOString(),
        latitude: 24 + hour * 0.25,
        longitude: -81,
        centralPressureHpa: 945,
      })),
      sites: [{ siteRef: 'inland', latitude: 26.7, longitude: -80.9 }],
    };
    const { storm, sites } = evaluate(body);
    // The coast lies between 25.1 N and 25.4 N there, behind bays: 4.5 to 5.6 hours on.
    expect(storm.fixes[0]!.hoursInland).toBe(0);
    expect(storm.fixes[1]!.hoursInland).toBeGreaterThan(0.4);
    expect(storm.fixes[1]!.hoursInland).toBeLessThan(1.6);
    expect(storm.fixes[3]!.hoursInland - storm.fixes[2]!.hoursInland).toBeCloseTo(6, 3);
    expect(storm.fixes[0]!.filled.hoursInland).toBe('land polygons');
    expect(sites[0]!.filled).toEqual({
      roughnessLengthM: 'open country, 0.03 m, assumed',
      fetchM: 'land polygons',
    });
    expect(sites[0]!.plain!.meanMs).toBeLessThan(sites[0]!.plain!.seaWindMs);
  });
  it('accepts longitudes of 180 to 360 and gives the same numbers', () => {
    const body = workedRequest();
    for (const at of [...body.track, ...body.sites]) if (at.longitude < 0) at.longitude += 360;
    const there = evaluate(body).sites;
    evaluate(workedRequest()).sites.forEach(({ enhanced }, i) =>
      expect(there[i]!.enhanced!.p95Ms).toBeCloseTo(enhanced!.p95Ms, 8),
    );
  });
});

describe('a request with faults', () => {
  it('is told every one of them at once', () => {
    const body = workedRequest() as { track: Record<string, unknown>[]; sites: Record<string, unknown>[] };
    body.track[1]!.windAveragingSeconds = 90;
    body.track[2]!.time = body.track[0]!.time;
    body.track[3]!.centralPressureHpa = null;
    body.track[3]!.maxWindMs = null;
    body.sites[0]!.siteRef = 'S2';
    body.sites[1]!.fetchM = [1, 2];
    body.sites[2]!.roughnessLengthM = 0;
    body.sites[3]!.latitude = 'north';
    body.sites[4]!.topografic = 1;
    expect(faultsOf({ ...body, options: { profile: 'another', anchor: 'middle' } }).sort()).toEqual(
      [
        'options.anchor',
        'options.profile',
        'sites.1.fetchM',
        'sites.1.siteRef',
        'sites.2.roughnessLengthM',
        'sites.3.latitude',
        'sites.4',
        'track.1.windAveragingSeconds',
        'track.2.time',
        'track.3.centralPressureHpa',
        'track.3.maxWindMs',
      ].sort(),
    );
  });
  it('is refused for one fix, no site, more than 200 sites', () => {
    const body = workedRequest();
    expect(faultsOf({ ...body, track: body.track.slice(0, 1) })).toEqual(['track']);
    expect(faultsOf({ ...body, sites: [] })).toEqual(['sites']);
    const many = Array.from({ length: 201 }, (_, i) => ({ ...body.sites[0]!, siteRef: `${i}` }));
    expect(faultsOf({ ...body, sites: many })).toEqual(['sites']);
    expect(faultsOf(null)).toEqual(['']);
  });
  it('is refused when a result cannot be right, not clipped', () => {
    const body = workedRequest();
    body.sites[0]!.topographicFactor = 2.9;
    expect(() => evaluate(body)).toThrow(/^No result: plain gust of site S1 is 1\d\d\.\d+; it must be in 0..120 m\/s/);
    try {
      evaluate(body);
    } catch (error) {
      expect((error as AppError).faults.map(({ path }) => path)).toEqual(['body.sites.0']);
    }
  });
});

describe('npm run evaluate', () => {
  const run = (input: string) => {
    const { status, stdout, stderr } = spawnSync('node', ['--import', 'tsx', 'api/bin/evaluate.ts'], {
      cwd: fileURLToPath(new URL('../..', import.meta.url)),
      input,
      encoding: 'utf8',
    });
    return { status, stderr, reply: JSON.parse(stdout) as unknown };
  };
  it('prints the reply as JSON and nothing else', () => {
    const { status, stderr, reply } = run(JSON.stringify(workedRequest()));
    expect([status, stderr]).toEqual([0, '']);
    expect(reply).toEqual(evaluate(workedRequest()));
  });
  it('takes options by name, in and out like the service', () => {
    const options = { asymmetry: 'schwerdt', gustFactor: 'wmo-off-sea', intensity: 'wind' } as const;
    const { status, reply } = run(JSON.stringify({ ...workedRequest(), options }));
    expect(status).toBe(0);
    expect(reply).toEqual(evaluate({ ...workedRequest(), options }));
    const refused = run(JSON.stringify({ ...workedRequest(), options: { asymmetry: 'lopsided' } }));
    expect(refused.status).toBe(2);
    expect(refused.reply).toMatchObject({ faults: [{ path: 'body.options.asymmetry' }] });
  });
  it('leaves with status 2 and a problem that names the field', () => {
    const { status, reply } = run(
      JSON.stringify({ ...workedRequest(), sites: [{ siteRef: 'x', latitude: 95, longitude: 0 }] }),
    );
    expect(status).toBe(2);
    expect(reply as Problem).toMatchObject({
      status: 422,
      code: 'invalid_request',
      faults: [{ path: 'body.sites.0.latitude' }],
    });
    expect(run('{').status).toBe(2);
  });
});
