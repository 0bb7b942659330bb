import type { EvaluationBody } from '#contract/evaluations.ts';
import { workedFixes, workedSites } from './worked-storm.ts';

const START = Date.UTC(2031, 8, 1);

/** The worked storm and its five sites as a request. */
export const workedRequest = (): EvaluationBody => ({
  track: workedFixes.map((fix) => ({
    time: new Date(START + 1000 * fix.timeS).toISOString(),
    latitude: fix.latitude,
    longitude: fix.longitude,
    centralPressureHpa: fix.centralPressurePa! / 100,
    ambientPressureHpa: 1010,
    maxWindMs: fix.maxWindMs,
    windAveragingSeconds: 60,
    radiusOfMaxWindM: fix.radiusOfMaxWindM,
    radius64KtM: [55_000, 50_000, 40_000, 48_000],
    ringWidthFraction: 0.35,
    eyeVorticityRatio: 0.2,
    hoursInland: fix.hoursInland,
  })),
  sites: workedSites.map((site, i) => ({
    siteRef: `S${i + 1}`,
    latitude: site.latitude,
    longitude: site.longitude,
    roughnessLengthM: site.roughness,
    fetchM: site.fetch,
    topographicFactor: site.hill,
    value: site.value,
    deductible: site.deductible,
    limit: site.limit,
  })),
});
