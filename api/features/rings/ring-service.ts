import { noticesFor } from '#contract/notices.ts';
import type { RingReply, RingRequest, StabilityMap } from '#contract/rings.ts';
import { describeRing } from '#engine/ring/description.ts';
import { smoothRingRotation, smoothRingVorticity } from '#engine/ring/profile.ts';
import { STABILITY_TABLE } from '#engine/ring/stability-table.ts';
import { ringShape } from '#engine/ring/stability.ts';

const POLYGONS = ['ellipse', 'triangle', 'square', 'pentagon', 'hexagon', 'heptagon', 'octagon', 'nonagon', 'decagon'];
const PROFILE_POINTS = 101;
const PROFILE_REACH = 2;

/** Describes eyewall rings: stability, pattern and profile; nothing is stored. */
export class RingService {
  constructor(private readonly engineVersion: () => string) {}

  describe(request: RingRequest): RingReply {
    const { maxWindMs, radiusOfMaxWindM, ringWidthFraction, eyeVorticityRatio, hoursInland } = request;
    const ring = describeRing({
      maxWind: maxWindMs,
      radiusOfMaxWind: radiusOfMaxWindM,
      widthFraction: ringWidthFraction,
      eyeRatio: eyeVorticityRatio,
      hoursInland,
    });
    const shape = ringShape(ringWidthFraction, eyeVorticityRatio);
    const { averageVorticity } = ring;
    const radii = Array.from({ length: PROFILE_POINTS }, (_, k) => (PROFILE_REACH * k) / (PROFILE_POINTS - 1));
    return {
      engineVersion: this.engineVersion(),
      wavenumber: ring.wavenumber,
      polygon: ring.wavenumber === null ? null : (POLYGONS[ring.wavenumber - 2] ?? `${ring.wavenumber}-sided polygon`),
      amplitude: ring.amplitude,
      switch: ring.switch,
      averageVorticityPerS: averageVorticity,
      eyeVorticityPerS: ring.eyeVorticity,
      ringVorticityPerS: ring.ringVorticity,
      growthPerS: ring.growth,
      eFoldS: ring.eFold,
      patternRadPerS: ring.pattern,
      patternPeriodS: ring.patternPeriod,
      passIntervalS: ring.passInterval,
      lifetimeS: ring.lifetime,
      orbitRadiusM: ring.orbitRadius,
      coreRadiusM: ring.coreRadius,
      circulationM2PerS: ring.circulation,
      modes: ring.modes.map(({ m, growth, pattern }) => ({ m, growthPerS: growth, patternRadPerS: pattern })),
      sharpModes: ring.sharpModes.map((mode) => ({
        m: mode.m,
        growthPerS: mode.growth,
        frequencyRadPerS: mode.frequency.length === 1 ? mode.frequency[0]! : [mode.frequency[0]!, mode.frequency[1]!],
        phaseLagDeg: mode.phaseLagDeg,
        amplitudeRatio: mode.amplitudeRatio,
        innerWaveRadPerS: mode.innerEdge / mode.m,
        outerWaveRadPerS: mode.outerEdge / mode.m,
        innerFlowRadPerS: ring.eyeVorticity / 2,
        outerFlowRadPerS: averageVorticity / 2,
        locked: mode.growth > 0,
      })),
      profile: {
        radiusM: radii.map((x) => x * radiusOfMaxWindM),
        vorticityPerS: radii.map((x) => averageVorticity * smoothRingVorticity(x, shape)),
        windMs: radii.map((x) =>
          x === 0 ? 0 : averageVorticity * smoothRingRotation(x, shape) * x * radiusOfMaxWindM,
        ),
      },
      notices: noticesFor('life-safety', 'uncertainty', 'scope'),
    };
  }

  map(): StabilityMap {
    const { widthFraction, eyeRatio, growth, wavenumber, amplitude } = STABILITY_TABLE;
    return {
      engineVersion: this.engineVersion(),
      widthFraction: [...widthFraction],
      eyeRatio: [...eyeRatio],
      growth: growth.map((row) => [...row]),
      wavenumber: wavenumber.map((row) => row.map((m) => m || null)),
      amplitude: amplitude.map((row) => [...row]),
    };
  }
}
