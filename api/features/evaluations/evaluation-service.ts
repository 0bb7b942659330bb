import type { EvaluationReply, EvaluationRequest } from '#contract/evaluations.ts';
import { RESULT_NOTICES } from '#contract/notices.ts';
import { DomainError } from '#engine/errors.ts';
import {
  eventSummary,
  SITE_BELOW_FLOOR,
  SITE_OUT_OF_REACH,
  scoreSites,
  type SiteScores,
} from '#engine/footprint/site-peaks.ts';
import { staysInEye } from '#engine/footprint/site-series.ts';
import type { LandIndex } from '#engine/geo/land.ts';
import { REFERENCE_CURVE } from '#engine/loss/damage-curve.ts';
import { quantisedLoss } from '#engine/loss/draw-losses.ts';
import type { ResolvedFix } from '#engine/track/fixes.ts';
import { prepareStorm, type Storm } from '#engine/track/storm.ts';
import { PA_PER_HPA } from '#engine/units.ts';
import { engineFix } from '../../compute/asked-fixes.ts';
import { batchOfSites, groundOf, type Ground } from '../../compute/asked-sites.ts';
import { engineObservations } from '../../compute/asked-vortices.ts';
import { AppError } from '../../errors.ts';

const WIDE_RANGE = 1.3;

type Notice = EvaluationReply['notices'][number];
type Site = EvaluationRequest['sites'][number];
type EvaluatedSite = EvaluationReply['sites'][number];

const EXPLORATORY: Notice = {
  code: 'exploratory',
  text: 'Exploratory: the reference damage curve, no signed calibration, stored nowhere.',
};

/** Scores a handful of sites under a track at once; nothing is stored and nothing is charged. */
export class EvaluationService {
  constructor(
    private readonly land: () => LandIndex,
    private readonly engineVersion: () => string,
  ) {}

  /** The whole chain for one request; a result that can't be right refuses the request instead of being clipped. */
  evaluate(request: EvaluationRequest): EvaluationReply {
    const ground = request.sites.map((site) => groundOf(site, this.land));
    const { storm, scores } = this.compute(request, ground);
    return {
      engineVersion: this.engineVersion(),
      notices: noticesOf(request, storm, scores),
      storm: { wavenumber: storm.wavenumber, fixes: storm.fixes.map(evaluatedFix) },
      sites: request.sites.map((site, i) => evaluatedSite(site, ground[i]!.filled, scores, i)),
      event: eventOf(request.sites, scores),
    };
  }

  private compute(request: EvaluationRequest, ground: readonly Ground[]): { storm: Storm; scores: SiteScores } {
    const asksForLand = request.track.some(({ hoursInland }) => hoursInland === null);
    try {
      const storm = prepareStorm(
        request.track.map((fix) => engineFix(fix, fix.windAveragingSeconds ?? 60)),
        request.options,
        asksForLand ? this.land() : null,
        engineObservations(request.vortexObservations),
      );
      return { storm, scores: scoreSites(storm, batchOfSites(request.sites, ground), REFERENCE_CURVE) };
    } catch (error) {
      if (!(error instanceof DomainError)) throw error;
      throw refusal(error, request.sites);
    }
  }
}

/** What the engine refuses, at the field of the request it speaks of: it numbers sites from 0 and fixes from 1. */
const refusal = (error: DomainError, sites: readonly Site[]): AppError => {
  const site = /site (\d+)$/.exec(error.quantity)?.[1];
  const fix = /fix (\d+)$/.exec(error.quantity)?.[1];
  const seen = /observation (\d+)$/.exec(error.quantity)?.[1];
  const told = `${error.value as string | number}; it must be ${error.requirement}.`;
  const [path, message] =
    site !== undefined
      ? [
          `body.sites.${site}`,
          `${error.quantity.replace(/site \d+$/, `site ${sites[Number(site)]!.siteRef}`)} is ${told}`,
        ]
      : [pathOf(fix, seen), `${error.quantity} is ${told}`];
  return new AppError('invalid_request', `No result: ${message}`, { faults: [{ path, message }], cause: error });
};

const pathOf = (fix: string | undefined, seen: string | undefined): string => {
  if (fix !== undefined) return `body.track.${Number(fix) - 1}`;
  return seen === undefined ? 'body' : `body.vortexObservations.${Number(seen) - 1}`;
};

const isoOf = (timeS: number) => new Date(Math.round(timeS * 1000)).toISOString();

const evaluatedFix = (fix: ResolvedFix): EvaluationReply['storm']['fixes'][number] => ({
  time: isoOf(fix.timeS),
  latitude: fix.latitude,
  longitude: fix.longitude,
  centralPressureHpa: fix.centralPressurePa / PA_PER_HPA,
  ambientPressureHpa: fix.ambientPressurePa / PA_PER_HPA,
  reportedMaxWindMs: fix.reportedMaxWindMs,
  pressureImpliedMaxWindMs: fix.pressureImpliedMaxWindMs,
  maxWindMs: fix.maxWindMs,
  anchoredMaxWindMs: fix.anchoredMaxWindMs,
  axisymmetricMaxWindMs: fix.axisymmetricMaxWindMs,
  intensitySource: fix.intensitySource,
  radiusOfMaxWindM: fix.radiusOfMaxWindM,
  shapeB: fix.shapeB,
  ringWidthFraction: fix.ringWidthFraction,
  eyeVorticityRatio: fix.eyeVorticityRatio,
  hoursInland: fix.hoursInland,
  translationMs: fix.translationMs,
  headingDeg: fix.headingDeg,
  filled: { ...fix.filled },
  anchor: fix.anchor,
  amplitude: fix.amplitude,
  patternRadPerS: fix.patternRadPerS,
  flags: [...fix.flags],
});

const evaluatedSite = (
  { siteRef, value }: Site,
  filled: Readonly<Record<string, string>>,
  scores: SiteScores,
  i: number,
): EvaluatedSite => {
  if (scores.reach[i] === SITE_OUT_OF_REACH) {
    return { siteRef, reach: 'out-of-reach', filled, plain: null, enhanced: null, loss: null };
  }
  return {
    siteRef,
    reach: scores.reach[i] === SITE_BELOW_FLOOR ? 'below-floor' : 'scored',
    filled,
    plain: {
      gustMs: scores.plainGust[i]!,
      meanMs: scores.plainMean[i]!,
      seaWindMs: scores.plainSeaWind[i]!,
      directionDeg: scores.plainDirection[i]!,
      time: isoOf(scores.plainTimeS[i]!),
      secondsAbove25Ms: scores.secondsAbove25[i]!,
      secondsAbove33Ms: scores.secondsAbove33[i]!,
    },
    enhanced: {
      meanMs: scores.enhancedMean[i]!,
      p5Ms: scores.p5[i]!,
      p50Ms: scores.p50[i]!,
      p90Ms: scores.p90[i]!,
      p95Ms: scores.p95[i]!,
      p99Ms: scores.p99[i]!,
    },
    loss:
      value === null
        ? null
        : {
            groundUpPlain: scores.groundUpPlain[i]!,
            grossPlain: scores.grossPlain[i]!,
            groundUpMean: scores.groundUpMean[i]!,
            grossMean: scores.grossMean[i]!,
          },
  };
};

const eventOf = (sites: readonly Site[], scores: SiteScores): EvaluationReply['event'] => {
  if (sites.every(({ value }) => value === null)) return null;
  const { mean, p5, p50, p95 } = eventSummary(scores.eventGross);
  // Rounded like the draws, so that the sum is exact and the order of sites does not matter.
  const grossPlain = scores.grossPlain.reduce(
    (sum, gross) => sum + (Number.isNaN(gross) ? 0 : quantisedLoss(gross)),
    0,
  );
  return { grossPlain, grossMean: mean, grossP5: p5, grossP50: p50, grossP95: p95 };
};

const noticesOf = (request: EvaluationRequest, storm: Storm, scores: SiteScores): Notice[] => {
  const notices: Notice[] = [EXPLORATORY, ...storm.notices];
  if (request.track.some((fix) => fix.maxWindMs !== null && fix.windAveragingSeconds === null)) {
    notices.push({
      code: 'averaging-assumed',
      text: 'Maximum winds without an averaging period are taken as 1-min winds.',
    });
  }
  const named = (pick: (i: number) => boolean) =>
    request.sites.flatMap(({ siteRef }, i) => (pick(i) ? [siteRef] : [])).join(', ');
  const far = named((i) => scores.reach[i] === SITE_OUT_OF_REACH);
  if (far) notices.push({ code: 'out-of-reach', text: `More than 1000 km from the track, not scored: ${far}.` });
  const wide = named((i) => scores.p99[i]! > WIDE_RANGE * scores.plainGust[i]!);
  if (wide) {
    notices.push({
      code: 'wide-vortex-range',
      text: `The 99th percentile exceeds 1.3 times the plain gust, more than observations we know of show: ${wide}.`,
    });
  }
  const inEye = named((i) => {
    const { latitude, longitude } = request.sites[i]!;
    return staysInEye(storm, { latitude, longitude });
  });
  if (inEye) {
    notices.push({
      code: 'inside-eye',
      text: `Always within half the radius of maximum wind; enhanced over plain means nothing there: ${inEye}.`,
    });
  }
  return [...notices, ...RESULT_NOTICES.map(({ code, text }) => ({ code, text }))];
};
