import type { ChainSettings } from '#contract/studies.ts';
import type { SiteBatch } from '#engine/footprint/site-peaks.ts';
import type { TrackFix } from '#engine/track/fixes.ts';
import type { SpreadBase } from '../../compute/spread.ts';
import type { Switch } from './spread-switches.ts';

/** What can be known about a study before looking at a switch. */
export interface SpreadFacts {
  settings: ChainSettings;
  fixes: readonly TrackFix[];
  base: SpreadBase;
  hasSitesOnLand: boolean;
  hasValues: boolean;
  inReach: boolean;
}

export const factsOf = (
  settings: ChainSettings,
  fixes: readonly TrackFix[],
  { roughnessM }: Pick<SiteBatch, 'roughnessM'>,
  base: SpreadBase,
): SpreadFacts => ({
  settings,
  fixes,
  base,
  hasSitesOnLand: roughnessM.some((length) => !Number.isNaN(length)),
  hasValues: base.outcome.grossMinor !== null,
  inReach: base.outcome.strongest !== null,
});

const NOTHING = 'No effect at these sites: every gust and every loss stays the same.';

/** Why a switch that changed nothing changes nothing here: the most particular reason that holds. */
export const noEffectReason = (tried: Pick<Switch, 'choice' | 'to'>, facts: SpreadFacts): string => {
  if (!facts.inReach) return 'No site is within 1000 km of the track.';
  return REASONS[tried.choice]?.(facts, tried.to.value) ?? NOTHING;
};

type Reason = (facts: SpreadFacts, to: string) => string | null;

const everyFix = ({ fixes }: SpreadFacts, holds: (fix: TrackFix) => boolean) => fixes.every(holds);
const first = (...reasons: (string | null | false)[]): string | null => reasons.find((reason) => reason) || null;

const noReportedWind = (facts: SpreadFacts) =>
  everyFix(facts, ({ maxWindMs }) => maxWindMs === null) && 'No fix reports a wind.';
const everyPressure = (facts: SpreadFacts) => everyFix(facts, ({ centralPressurePa }) => centralPressurePa !== null);
const allByPressure = ({ base }: SpreadFacts) =>
  base.storm.fixes.every(({ intensitySource }) => intensitySource === 'pressure');
const allByWind = ({ base }: SpreadFacts) =>
  base.storm.fixes.every(({ intensitySource }) => intensitySource === 'wind');
const everyRadius = (facts: SpreadFacts) =>
  everyFix(facts, ({ radiusOfMaxWindM }) => radiusOfMaxWindM !== null) &&
  'The track gives every radius of maximum wind.';
const noVortices = ({ settings, base }: SpreadFacts) =>
  !settings.mesovortices
    ? 'The mesovortices are off.'
    : base.storm.wavenumber === null && 'No ring of this storm grows vortices.';
const kepert = ({ settings }: SpreadFacts, what: string) =>
  settings.wind.asymmetry === 'kepert' && `The Kepert boundary layer brings its own ${what}.`;
const NOT_NEAR = 'No site comes near the ring of vortices.';
const onlyAtSea = ({ hasSitesOnLand }: SpreadFacts) => !hasSitesOnLand && 'No site is on land.';

const REASONS: Readonly<Record<string, Reason>> = {
  intensity: (facts) =>
    first(
      noReportedWind(facts),
      everyFix(facts, ({ centralPressurePa }) => centralPressurePa === null) && 'No fix gives a central pressure.',
      everyFix(facts, ({ centralPressurePa, maxWindMs }) => centralPressurePa === null || maxWindMs === null) &&
        'No fix gives both a central pressure and a wind.',
    ),
  anchor: (facts, to) =>
    first(
      noVortices(facts),
      facts.settings.anchor === 'auto' && to === 'mean' && allByPressure(facts)
        ? 'Every fix takes its maximum from the pressure, which is a mean already.'
        : null,
      facts.settings.anchor === 'auto' && to === 'peak' && allByWind(facts)
        ? 'Every fix takes its maximum from the reported wind, which is a peak already.'
        : null,
    ),
  mesovortices: (facts) =>
    first(facts.base.storm.wavenumber === null && 'No ring of this storm grows vortices.') ?? NOT_NEAR,
  regime: (facts) => first(noVortices(facts)) ?? NOT_NEAR,
  ringWidth: (facts) => first(noVortices(facts)) ?? NOT_NEAR,
  eyeRatio: (facts) => first(noVortices(facts)) ?? NOT_NEAR,
  reportedAveraging: (facts) =>
    first(
      noReportedWind(facts),
      allByPressure(facts) && everyPressure(facts) && 'No effect under pressure: the reported wind isn’t used.',
    ),
  radiusSource: (facts) =>
    first(
      everyRadius(facts),
      everyFix(facts, ({ radius64KtM }) => (radius64KtM ?? []).every((radius) => radius === 0)) &&
        'The track gives no 64-kt radii.',
    ),
  radiusRelation: (facts) =>
    first(everyRadius(facts)) ??
    'The missing radii come from 64-kt radii or from fixes within 6 h, so no relation is asked.',
  shapeRelation: (facts) =>
    first(
      facts.settings.wind.shapeSource === 'max-wind' &&
        allByWind(facts) &&
        'Every fix is run by its wind, to which the shape is fitted; no relation is asked.',
    ),
  windPressure: (facts) => first(everyPressure(facts) && 'Every fix gives a central pressure.'),
  outerWind: (facts) => first(radiiMissing(facts, ['radius34KtM']) && 'The track gives no 34-kt radii.'),
  quadrants: (facts) =>
    first(
      radiiMissing(facts, ['radius34KtM', 'radius50KtM', 'radius64KtM']) &&
        'The track gives no wind radii by quadrant.',
    ),
  decay: ({ base }) =>
    base.storm.fixes.every(({ hoursInland }) => hoursInland === 0)
      ? 'The centre stays over water.'
      : 'The track gives its own intensities after landfall.',
  inflow: (facts) => first(kepert(facts, 'inflow')),
  surfaceFactor: (facts) =>
    first(
      kepert(facts, 'friction'),
      facts.settings.wind.profile === 'holland-2010' && 'This profile is one of the surface wind already.',
    ),
  landReduction: (facts) => first(onlyAtSea(facts)),
  fetch: (facts) =>
    first(onlyAtSea(facts)) ?? 'At every site the wind of the peak has had land upwind for long enough.',
  turbulence: ({ settings }) =>
    settings.wind.gustFactor === 'turbulence' ? null : 'The gust factor is that of a class, whatever the turbulence.',
  seaDrag: () => 'The wind stays below the speed from which these laws differ.',
  halfDamage: lossReason,
  curveSet: lossReason,
};

function lossReason({ hasValues }: SpreadFacts): string {
  return hasValues ? 'No gust reaches the threshold of damage.' : 'No site has a value, so there is no loss.';
}

function radiiMissing({ fixes }: SpreadFacts, fields: readonly string[]): boolean {
  return fixes.every((fix) =>
    fields.every((field) => {
      const radii = (fix as Record<string, unknown>)[field];
      return !Array.isArray(radii) || radii.every((radius) => !(Number(radius) > 0));
    }),
  );
}
