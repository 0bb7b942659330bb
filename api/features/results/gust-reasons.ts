import type { z } from 'zod';
import type { LadderStep, SiteDetail } from '#contract/runs.ts';
import type { GustLadder } from '#engine/footprint/site-series.ts';

type Rung = z.infer<typeof LadderStep>;

const TERRAIN_WORDS: Readonly<Record<string, string>> = {
  water_edge: 'water’s edge',
  open: 'open country',
  suburban: 'suburbs',
  wooded: 'woodland',
  dense_urban: 'dense city',
  unknown: 'open country, assumed',
};
const POINTS = ['north', 'north-east', 'east', 'south-east', 'south', 'south-west', 'west', 'north-west'];

const decimal = (value: number, digits = 1) => value.toLocaleString('en', { maximumFractionDigits: digits });
const km = (metres: number) => `${decimal(metres / 1000, metres < 10_000 ? 1 : 0)} km`;
const from = (degrees: number) => POINTS[Math.round(degrees / 45) % POINTS.length]!;

/** Why this gust: the rungs from the wind above the friction layer to the plain gust, each with its reason. */
export const ladderOf = ({ wind, upwindFetchM }: GustLadder, { terrain }: Pick<SiteDetail, 'terrain'>): Rung[] => {
  const flat = wind.meanMs * wind.gustFactor;
  const motion = wind.seaWindMs - wind.surfaceMs;
  const land =
    upwindFetchM === null
      ? 'at sea: no land is felt'
      : upwindFetchM >= 100_000
        ? `${TERRAIN_WORDS[terrain] ?? terrain}, no sea within 100 km upwind`
        : `${TERRAIN_WORDS[terrain] ?? terrain}, ${km(upwindFetchM)} from the sea to the ${from(wind.directionDeg)}`;
  return [
    {
      key: 'gradient',
      reason: `Wind above the friction layer, ${km(wind.distanceM)} from the centre`,
      operation: 'start',
      amount: wind.gradientMs,
      afterMs: wind.gradientMs,
    },
    {
      key: 'surface',
      reason: 'Friction down to 10 m over open sea, 10-min mean',
      operation: 'times',
      amount: wind.surfaceFactor,
      afterMs: wind.surfaceMs,
    },
    {
      key: 'motion',
      reason: motion < 0 ? 'This side moves against the storm' : 'This side moves with the storm',
      operation: 'plus',
      amount: motion,
      afterMs: wind.seaWindMs,
    },
    {
      key: 'terrain',
      reason: `Ground upwind: ${land}`,
      operation: 'times',
      amount: wind.terrainFactor,
      afterMs: wind.meanMs,
    },
    {
      key: 'gust_factor',
      reason: `From the 10-min mean to the peak 3-s gust, turbulence ${decimal(100 * wind.turbulence)} %`,
      operation: 'times',
      amount: wind.gustFactor,
      afterMs: flat,
    },
    {
      key: 'hills',
      reason: wind.topographicFactor === 1 ? 'Flat ground: no hill is known here' : 'Speed-up over the hill',
      operation: 'times',
      amount: wind.topographicFactor,
      afterMs: wind.gustMs,
    },
  ];
};
