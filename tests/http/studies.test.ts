import { randomUUID } from 'node:crypto';
import { describe, expect, it } from 'vitest';
import { Problem } from '#contract/errors.ts';
import type { Track } from '#contract/scenarios.ts';
import { SpreadReply, WindFieldReply, type SpreadRow } from '#contract/studies.ts';
import { CHAIN_CHOICES, WIND_CHOICES } from '#contract/wind-choice-catalogue.ts';
import { createTestApp } from '../helpers/app.ts';
import { REEF } from '../helpers/people.ts';
import { addRunFixture, gulfTrack } from '../helpers/run-fixture.ts';

const { database, signIn } = await createTestApp();
const book = await addRunFixture(database, { sites: 25, near: 20 });
const underwriter = await signIn('underwriter');

const scenarioOf = async (versionId: string): Promise<string> =>
  (await database.superUser('scenario_versions').where({ id: versionId }).first('scenario_id')).scenario_id;
const gulf = await scenarioOf(await book.addTrack('Aster', gulfTrack()));

const SITES = [
  { siteRef: 'Quay', latitude: 30.05, longitude: -85.25, roughnessLengthM: 0.03, value: 1_000_000, deductible: 20_000 },
  { siteRef: 'Rig', latitude: 29.0, longitude: -85.6, roughnessLengthM: null, value: 2_000_000 },
];
const spread = async (scenarioId: string, body: object): Promise<SpreadReply> =>
  SpreadReply.parse((await underwriter.post(`/scenarios/${scenarioId}/spread`, body).expect(200)).body);
const rowsFor = ({ rows }: SpreadReply, choice: string): SpreadRow[] => rows.filter((row) => row.choice === choice);
const problemOf = (reply: { body: unknown }) => Problem.parse(reply.body);

const track = (changes: (fix: Track['fixes'][number]) => Partial<Track['fixes'][number]>): Track => {
  const { fixes, declarations } = gulfTrack();
  return { declarations, fixes: fixes.map((fix) => ({ ...fix, ...changes(fix) })) };
};

const asked = await spread(gulf, { sites: SITES });

describe('a spread', () => {
  it('tries every other value of every choice once, from the value in use', () => {
    for (const { key, values } of [...WIND_CHOICES, ...CHAIN_CHOICES]) {
      const rows = rowsFor(asked, key);
      expect(rows.map(({ to }) => to.value).sort()).toEqual(
        values
          .slice(1)
          .map(({ value }) => value)
          .sort(),
      );
      for (const { from } of rows) expect(from.value).toBe(values[0]!.value);
    }
    expect(
      rowsFor(asked, 'radius')
        .map(({ to }) => to.value)
        .sort(),
    ).toEqual(['0.7', '1.4']);
    expect(
      rowsFor(asked, 'halfDamage')
        .map(({ to }) => to.title)
        .sort(),
    ).toEqual(['110 kt', '190 kt']);
    expect(rowsFor(asked, 'reportedAveraging').map(({ to }) => to.value)).toEqual(['600']);
  });

  it('ranks by the change of the event’s loss, then of the gust, those without effect last', () => {
    const acting = asked.rows.filter(({ reason }) => reason === null);
    expect(asked.rows.slice(0, acting.length)).toEqual(acting);
    expect(acting.length).toBeGreaterThan(3);
    const size = ({ grossChangeMinor, peakGustChangeMs }: SpreadRow) =>
      Math.abs(grossChangeMinor!) * 1e6 + Math.abs(peakGustChangeMs!);
    expect(acting.map(size)).toEqual(acting.map(size).sort((a, b) => b - a));
    for (const { peakGustMs, grossMinor, peakGustChangeMs, grossChangeMinor } of acting) {
      expect(peakGustChangeMs).toBeCloseTo(peakGustMs!.p50 - asked.base.peakGustMs.p50, 9);
      expect(grossChangeMinor).toBe(grossMinor!.p50 - asked.base.grossMinor!.p50);
    }
  });

  it('agrees with an evaluation of the same track, sites and option', async () => {
    const { fixes } = gulfTrack();
    const evaluated = async (options: object) => {
      const body = {
        track: fixes.map((fix) => ({ ...fix, ringWidthFraction: 0.35, eyeVorticityRatio: 0.2 })),
        sites: SITES,
        options,
      };
      return (await underwriter.post('/evaluations', body).expect(200)).body;
    };
    // The curve of the fixture is the reference curve that evaluations use.
    const plain = await evaluated({});
    const wind = await evaluated({ intensity: 'wind' });
    const peak = (reply: { sites: { plain: { gustMs: number } }[] }) =>
      Math.max(...reply.sites.map((site) => site.plain.gustMs));
    expect(asked.base.peakGustMs.plain).toBe(peak(plain));
    expect(asked.base.grossMinor!.p50).toBe(Math.floor(plain.event.grossP50 * 100 + 0.5));
    const [tried] = rowsFor(asked, 'intensity');
    expect(tried!.peakGustMs!.plain).toBe(peak(wind));
    expect(tried!.grossMinor!.p95).toBe(Math.floor(wind.event.grossP95 * 100 + 0.5));
  });

  it('gives the same digits each time', async () => {
    expect(await spread(gulf, { sites: SITES })).toEqual(asked);
  });

  it('says in words which sites it used, and where ring and curve come from', async () => {
    expect(asked.sites).toEqual({ used: 2, of: 2, rule: 'The sites sent with the request.' });
    expect(asked.currency).toBeNull();
    expect(asked.curve).toBe('Cubic curve on local gusts (Test curve, version 1)');
    const codes = asked.notices.map(({ code }) => code);
    expect(codes).toEqual(
      expect.arrayContaining(['exploratory', 'ring-from-calibration', 'life-safety', 'uncertainty']),
    );
    const book25 = await spread(gulf, { editionId: book.editionId });
    expect(book25.sites).toMatchObject({ used: 20, of: 25 });
    expect(book25.sites.rule).toMatch(
      /^All 20 sites within 1000 km of the track, of 25 ready to be scored in Book .+, edition 1\.$/,
    );
    expect(book25.currency).toBe('USD');
    expect(book25.base.strongestSite).toMatch(/^S-/);
  });
});

describe('a switch without effect', () => {
  it('says why', () => {
    const reason = (choice: string) => rowsFor(asked, choice).map((row) => row.reason);
    expect(reason('radiusRelation').every((words) => words === 'The track gives every radius of maximum wind.')).toBe(
      true,
    );
    expect(reason('windPressure')).toEqual(['Every fix gives a central pressure.']);
    expect(reason('outerWind')).toEqual(['The track gives no 34-kt radii.']);
    expect(reason('quadrants')).toEqual(['The track gives no wind radii by quadrant.']);
    expect(reason('reportedAveraging')).toEqual(['No effect under pressure: the reported wind isn’t used.']);
    expect(rowsFor(asked, 'anchor').find(({ to }) => to.value === 'mean')!.reason).toBe(
      'Every fix takes its maximum from the pressure, which is a mean already.',
    );
  });

  it('says that no site is on land, has a value or is in reach', async () => {
    const rig = { ...SITES[1]!, value: undefined };
    const atSea = await spread(gulf, { sites: [rig] });
    for (const choice of ['landReduction', 'fetch'])
      expect(rowsFor(atSea, choice)[0]!.reason).toBe('No site is on land.');
    expect(rowsFor(atSea, 'halfDamage')[0]!.reason).toBe('No site has a value, so there is no loss.');
    expect(atSea.base.grossMinor).toBeNull();
    const far = await spread(gulf, { sites: [{ ...rig, longitude: 10 }] });
    expect(new Set(far.rows.map(({ reason }) => reason))).toEqual(new Set(['No site is within 1000 km of the track.']));
    expect(far.base).toMatchObject({ strongestSite: '', peakGustMs: { plain: 0, p95: 0 } });
  });

  it('says that nothing is reported, or that only winds are', async () => {
    const pressures = await scenarioOf(
      await book.addTrack(
        'Pressures',
        track(() => ({ maxWindMs: null })),
      ),
    );
    const first = await spread(pressures, { sites: SITES });
    expect(rowsFor(first, 'intensity')[0]!.reason).toBe('No fix reports a wind.');
    expect(first.intensity.wind).toBeNull();
    const winds = await scenarioOf(
      await book.addTrack(
        'Winds',
        track(() => ({ centralPressureHpa: null })),
      ),
    );
    const second = await spread(winds, { sites: SITES });
    expect(rowsFor(second, 'intensity')[0]!.reason).toBe('No fix gives a central pressure.');
    expect(second.intensity.pressure).toBeNull();
    expect(rowsFor(second, 'windPressure')[0]!.to.value).toBe('atkinson-holliday-1977');
  });
});

describe('both readings of the strongest fix', () => {
  it('stand side by side, and say when they don’t belong together', async () => {
    const { pressure, wind, relationB, differ } = asked.intensity;
    expect(wind!.maxWindMs).toBeCloseTo(52, 9);
    expect(pressure!.radiusOfMaxWindM).toBe(35_000);
    expect(relationB).toBeGreaterThan(0.8);
    expect(differ).toBe(false);
    const odd = await scenarioOf(
      await book.addTrack(
        'Odd',
        track(() => ({ maxWindMs: 74, centralPressureHpa: 950 })),
      ),
    );
    const reply = await spread(odd, { sites: SITES });
    expect(reply.intensity.differ).toBe(true);
    expect(reply.notices[0]!.code).toBe('wind-and-pressure-differ');
  });
});

describe('a wind field', () => {
  const time = '2026-09-03T09:00:00.000Z';
  const field = async (body: object = {}): Promise<WindFieldReply> =>
    WindFieldReply.parse(
      (await underwriter.post(`/scenarios/${gulf}/wind-field`, { time, points: 21, ...body }).expect(200)).body,
    );

  it('has the profile and the picture of the moment asked for', async () => {
    const reply = await field();
    expect(reply.time).toBe(time);
    expect([reply.firstTime, reply.lastTime]).toEqual(['2026-09-03T00:00:00.000Z', '2026-09-03T18:00:00.000Z']);
    expect(reply.field.seaWindMs).toHaveLength(21 * 21);
    const { radiusM, meanMs, rightMs, leftMs } = reply.profile;
    const strongest = rightMs.indexOf(Math.max(...rightMs));
    expect(radiusM[strongest]!).toBeGreaterThan(0.8 * reply.state.radiusOfMaxWindM);
    expect(radiusM[strongest]!).toBeLessThan(1.2 * reply.state.radiusOfMaxWindM);
    expect(rightMs[strongest]!).toBeGreaterThan(leftMs[strongest]!);
    expect(Math.max(...reply.field.seaWindMs)).toBeLessThanOrEqual(Math.max(...rightMs) * 1.02);
    expect(meanMs.every((mean) => mean < rightMs[strongest]!)).toBe(true);
    // The middle point is the centre; east of it lies the next number in its row.
    const middle = (21 * 21 - 1) / 2;
    expect(reply.field.seaWindMs[middle]!).toBeLessThan(reply.field.seaWindMs[middle + 2]!);
  });

  it('is the same whoever asks, and with every setting at its default', async () => {
    const modeler = await signIn('modeler');
    const settings = { wind: { profile: 'holland-1980' } };
    const reply = await modeler.post(`/scenarios/${gulf}/wind-field`, { time, points: 21, settings }).expect(200);
    expect(reply.body).toEqual(await field());
  });

  it('outside the track is refused with the times it has', async () => {
    const reply = await underwriter
      .post(`/scenarios/${gulf}/wind-field`, { time: '2026-09-04T00:00:00.000Z' })
      .expect(422);
    expect(problemOf(reply).faults).toEqual([
      {
        path: 'body.time',
        message:
          '2026-09-04 00:00 UTC lies outside the track. Give a time from 2026-09-03 00:00 UTC to 2026-09-03 18:00 UTC.',
      },
    ]);
  });
});

describe('whom studies are for', () => {
  const time = '2026-09-03T09:00:00.000Z';
  it.each(['admin', 'auditor'] as const)('isn’t the %s', async (role) => {
    const person = await signIn(role);
    for (const [path, body] of [
      ['spread', { sites: SITES }],
      ['wind-field', { time }],
    ] as const) {
      const reply = await person.post(`/scenarios/${gulf}/${path}`, body).expect(403);
      expect(problemOf(reply).code).toBe('not_allowed');
    }
  });

  it('isn’t a stranger, who gets what nobody’s would give', async () => {
    const stranger = await signIn('underwriter', { org: REEF });
    await stranger.post(`/scenarios/${gulf}/spread`, { sites: SITES }).expect(404);
    await stranger.post(`/scenarios/${gulf}/wind-field`, { time }).expect(404);
    await underwriter.post(`/scenarios/${randomUUID()}/spread`, { sites: SITES }).expect(404);
    await underwriter.post(`/scenarios/${gulf}/spread`, { sites: SITES, version: 7 }).expect(404);
    await underwriter.post(`/scenarios/${gulf}/spread`, { editionId: randomUUID() }).expect(404);
    await underwriter.post(`/scenarios/${gulf}/spread`, { sites: SITES, curveSetId: randomUUID() }).expect(404);
  });
});

describe('a request with faults', () => {
  const faultsOf = async (path: string, body: object): Promise<string[]> =>
    problemOf(await underwriter.post(`/scenarios/${gulf}/${path}`, body).expect(422)).faults.map((fault) => fault.path);

  it('is told every one of them', async () => {
    expect(await faultsOf('spread', {})).toEqual(['body.editionId']);
    expect(await faultsOf('spread', { sites: SITES, editionId: book.editionId })).toEqual(['body.editionId']);
    expect(
      await faultsOf('spread', { sites: SITES, settings: { anchor: 'middle', wind: { profile: 'round' } } }),
    ).toEqual(['body.settings.anchor', 'body.settings.wind.profile']);
    expect(await faultsOf('wind-field', { time: 'noon', points: 20, halfWidthM: 1 })).toEqual([
      'body.time',
      'body.halfWidthM',
      'body.points',
    ]);
  });
});
