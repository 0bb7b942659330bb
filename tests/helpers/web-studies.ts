import type { ScenarioVersion } from '#contract/scenarios.ts';
import { ChainSettings, type SpreadReply, type SpreadRow, type WindFieldReply } from '#contract/studies.ts';

const ID = '00000000-0000-4000-8000-000000000041';
const START = Date.parse('2026-09-03T00:00:00.000Z');
const at = (hours: number) => new Date(START + hours * 3_600_000).toISOString();

const gusts = (centre: number) => ({ plain: centre - 1, p5: centre - 2, p50: centre, p95: centre + 3 });
const money = (centre: number) => ({
  plain: centre - 1_000_000_000,
  p5: centre - 6_900_000_000,
  p50: centre,
  p95: centre + 10_700_000_000,
  mean: centre,
});

const row = (changes: Partial<SpreadRow> & Pick<SpreadRow, 'choice' | 'title' | 'from' | 'to'>): SpreadRow => ({
  peakGustMs: gusts(68.4),
  peakGustChangeMs: 0,
  grossMinor: money(21_100_000_000),
  grossChangeMinor: 0,
  reason: null,
  ...changes,
});

/** A spread as the service gives it: two settings that move something, one that can’t here, one outside the base. */
export const testSpread = (changes: Partial<SpreadReply> = {}): SpreadReply => ({
  engineVersion: 'e'.repeat(64),
  scenario: { id: ID, name: 'Ilvane', version: 3 },
  settings: ChainSettings.parse({}),
  sites: { used: 200, of: 358, rule: 'the largest values within reach.' },
  currency: 'USD',
  curve: 'Coastal 4',
  base: { peakGustMs: gusts(68.4), strongestSite: 'S-0402', grossMinor: money(21_100_000_000) },
  rows: [
    row({
      choice: 'intensity',
      title: 'Intensity from',
      from: { value: 'pressure', title: 'Pressure' },
      to: { value: 'wind', title: 'Reported wind', source: 'The track’s own maximum' },
      peakGustChangeMs: 13.4,
      grossChangeMinor: 11_600_000_000,
    }),
    row({
      choice: 'halfDamage',
      title: 'Wind that does half damage',
      from: { value: '150', title: '150 kt' },
      to: { value: '190', title: '190 kt', source: 'Emanuel (2011)' },
      grossChangeMinor: -2_200_000_000,
    }),
    row({
      choice: 'radiusRelation',
      title: 'Relation for the radius of maximum wind',
      from: { value: 'vickery-wadhera-2008', title: 'Vickery & Wadhera 2008, all hurricanes' },
      to: { value: 'knaff-2015', title: 'Knaff 2015', source: 'Knaff et al. (2015)' },
      reason: 'The track gives every radius of maximum wind.',
    }),
  ],
  intensity: {
    fix: 4,
    centralPressureHpa: 925,
    pressure: { maxWindMs: 59.9, radiusOfMaxWindM: 15_400, shapeB: 1.6 },
    wind: { maxWindMs: 72, radiusOfMaxWindM: 18_700, shapeB: 2.1 },
    relationB: 1.6,
    differ: true,
  },
  notices: [],
  ...changes,
});

/** A saved track of three fixes at 0, 6 and 9 h; the strongest is the second. */
export const testScenario = (): ScenarioVersion => {
  const times = [at(0), at(6), at(9)];
  return {
    id: ID,
    scenarioId: ID,
    name: 'Ilvane',
    number: 3,
    createdAt: at(0),
    createdBy: 'Teodor Brask',
    derivation: null,
    stale: null,
    digest: 'a'.repeat(64),
    track: {
      fixes: times.map((time) => ({
        time,
        latitude: 28,
        longitude: -80,
        centralPressureHpa: 925,
        ambientPressureHpa: 1010,
        maxWindMs: 72,
        radiusOfMaxWindM: 20_000,
        radius34KtM: null,
        radius50KtM: null,
        radius64KtM: null,
        ringWidthFraction: null,
        eyeVorticityRatio: null,
        hoursInland: null,
      })),
      declarations: { windAveragingS: 60, source: '', asOf: null },
    },
    resolution: {
      fixes: times.map((time) => ({
        time,
        latitude: 28,
        longitude: -80,
        centralPressureHpa: 925,
        ambientPressureHpa: 1010,
        reportedMaxWindMs: 72,
        pressureImpliedMaxWindMs: 59.9,
        maxWindMs: 59.9,
        intensitySource: 'pressure',
        radiusOfMaxWindM: 20_000,
        headingDeg: 0,
        speedMs: 5,
        hoursInland: 0,
        overLand: false,
        anchor: 'mean',
        amplitude: 0.1,
        filled: {},
        flags: [],
      })),
      findings: [],
      path: [
        [-80, 28],
        [-80, 29],
      ],
      wavenumber: null,
      hemisphere: 'north',
      maxima: { fix: 1, reportedMs: 72, pressureImpliedMs: 59.9, used: 'pressure' },
    },
    notices: [],
  };
};

const POINTS = 11;
/** A field whose gust rises by 1 m/s for each 40 km to the east: 20 at the western edge, 30 at the eastern. */
export const testField = (time: string, settings: ChainSettings = ChainSettings.parse({})): WindFieldReply => {
  const step = 40_000;
  const columns = Array.from({ length: POINTS * POINTS }, (_, index) => index % POINTS);
  // The B of a test is everywhere 2 m/s stronger.
  const more = settings.wind.asymmetry === 'kepert' ? 2 : 0;
  const radiusM = [0, 20_000, 50_000, 100_000, 200_000];
  const line = (scale: number) => radiusM.map((radius) => (radius === 0 ? 0 : (scale * 20_000) / radius + more));
  return {
    engineVersion: 'e'.repeat(64),
    scenario: { id: ID, name: 'Ilvane', version: 3 },
    firstTime: at(0),
    lastTime: at(9),
    time,
    settings,
    state: {
      latitude: 28,
      longitude: -80,
      headingDeg: 0,
      translationMs: 5,
      hemisphere: 'north',
      maxWindMs: 59.9,
      radiusOfMaxWindM: 20_000,
      shapeB: 1.6,
      pressureDeficitPa: 8500,
      hoursInland: 0,
    },
    profile: {
      radiusM,
      gradientMs: line(60),
      meanMs: line(48),
      rightMs: line(52),
      leftMs: line(44),
      aheadMs: line(48),
      asternMs: line(48),
    },
    field: {
      halfWidthM: (step * (POINTS - 1)) / 2,
      points: POINTS,
      seaWindMs: columns.map((column) => 10 + column + more),
      directionDeg: columns.map(() => 90),
      gustMs: columns.map((column) => 20 + column + more),
    },
    notices: [],
  };
};
