import { stableStep, stepFlow, windOnGrid, type BarotropicFlow } from '#engine/ring/barotropic.ts';
import { DEFAULT_BREAKDOWN, ringFlow } from '#engine/ring/breakdown.ts';
import { amplitudeLaw } from '#engine/ring/amplitude.ts';
import { azimuthalShape, radialShape } from '#engine/ring/draws.ts';
import { smoothRingModes } from '#engine/ring/stability.ts';
import { seededRandom } from '#engine/numerics/seeded-random.ts';

/** A ring of the study; lengths in outer radii, times in one over the average vorticity. */
export type StudyRing = { delta: number; gamma: number; seed: number; relaxation?: number };

/** What a run gave: how far the strongest wind stands above the mean around the ring while vortices are active. */
export type RingRun = {
  ring: StudyRing;
  /** A1 of the amplitude law. */
  law: number;
  /** Local maximum over simultaneous mean maximum, less one, averaged over the active window. */
  measured: number;
  /** Along-flow speed over the simultaneous mean maximum: shape (frames, RADII, AZIMUTHS), in the window. */
  frames: Float64Array[];
};

const SIDE = 6;
const FRAME = 1;
const LONGEST = 110;
const WINDOW = 30;
const AZIMUTHS = 96;
const RADII = 36;
const REACH = 1.8;
const radiusAt = (k: number) => (REACH * (k + 0.5)) / RADII;

/** The ring as the breakdown lays it, with a maximum of 60 m/s at 30 km: one over its average vorticity is 250 s. */
const RADIUS = 30_000;
const UNIT_S = 250;
const flowOf = ({ delta, gamma, seed, relaxation }: StudyRing, points: number): BarotropicFlow =>
  ringFlow({
    ...DEFAULT_BREAKDOWN,
    ...{ maxWind: 60, radiusOfMaxWind: RADIUS, widthFraction: 1 - delta, eyeRatio: gamma },
    ...{ points, sideInRadii: SIDE, seed, relaxationS: relaxation === undefined ? null : relaxation * UNIT_S },
  });

/** Along-flow speed on circles, and its greatest mean and value. */
const circles = (flow: BarotropicFlow) => {
  const { u, v } = windOnGrid(flow);
  const { points, side } = flow;
  const speed = new Float64Array(RADII * AZIMUTHS);
  let meanMax = 0;
  let most = 0;
  for (let k = 0; k < RADII; k++) {
    let sum = 0;
    for (let a = 0; a < AZIMUTHS; a++) {
      const cos = Math.cos((2 * Math.PI * a) / AZIMUTHS);
      const sin = Math.sin((2 * Math.PI * a) / AZIMUTHS);
      const p = ((RADIUS * radiusAt(k) * cos) / side + 0.5) * points;
      const q = ((RADIUS * radiusAt(k) * sin) / side + 0.5) * points;
      const i = Math.floor(p);
      const j = Math.floor(q);
      const at = j * points + i;
      const mix = (f: Float64Array) =>
        (f[at]! * (1 - p + i) + f[at + 1]! * (p - i)) * (1 - q + j) +
        (f[at + points]! * (1 - p + i) + f[at + points + 1]! * (p - i)) * (q - j);
      const [east, north] = [mix(u), mix(v)];
      const value = Math.hypot(east, north);
      speed[k * AZIMUTHS + a] = value;
      sum += north * cos - east * sin;
      most = Math.max(most, value);
    }
    meanMax = Math.max(meanMax, sum / AZIMUTHS);
  }
  return { speed: speed.map((value) => value / meanMax), ratio: most / meanMax - 1 };
};

/** Runs one ring to the end of its active window. A maintained ring is taken from 60 on, for 60. */
export const runRing = (ring: StudyRing, points: number): RingRun => {
  const flow = flowOf(ring, points);
  const law = amplitudeLaw(smoothRingModes(ring.delta, ring.gamma));
  const ratios: number[] = [];
  const frames: Float64Array[] = [];
  const until = ring.relaxation === undefined ? LONGEST : 120;
  const first = circles(flow);
  const steps = Math.ceil((FRAME * UNIT_S) / stableStep(flow, 74));
  ratios.push(first.ratio);
  frames.push(first.speed);
  for (let t = FRAME; t <= until; t += FRAME) {
    for (let k = 0; k < steps; k++) stepFlow(flow, (FRAME * UNIT_S) / steps);
    const { speed, ratio } = circles(flow);
    ratios.push(ratio);
    frames.push(speed);
    const most = Math.max(...ratios);
    const onset = ratios.findIndex((value) => value > most / 2);
    if (ring.relaxation === undefined && most > 0.03 && t > onset + WINDOW) break;
  }
  if (ring.relaxation !== undefined) {
    const steady = ratios.slice(60);
    return { ring, law, measured: steady.reduce((sum, x) => sum + x, 0) / steady.length, frames: frames.slice(60) };
  }
  const most = Math.max(...ratios);
  const active = ratios.flatMap((value, t) => (value > most / 2 ? [t] : [])).slice(0, WINDOW);
  const measured = active.reduce((sum, t) => sum + ratios[t]!, 0) / active.length;
  return { ring, law, measured, frames: active.map((t) => frames[t]!) };
};

/** Least-squares factor of measured = a × law through the origin, with its scatter. */
export const fitLaw = (runs: readonly RingRun[]) => {
  const a =
    runs.reduce((sum, { law, measured }) => sum + law * measured, 0) /
    runs.reduce((sum, { law }) => sum + law * law, 0);
  const mean = runs.reduce((sum, { measured }) => sum + measured, 0) / runs.length;
  const off = runs.map(({ law, measured }) => measured - a * law);
  const rms = Math.sqrt(off.reduce((sum, x) => sum + x * x, 0) / runs.length);
  const spread = Math.sqrt(runs.reduce((sum, { measured }) => sum + (measured - mean) ** 2, 0) / runs.length);
  return { a, rms, r2: 1 - (rms / spread) ** 2 };
};

const STRENGTH = [0.5, 0.65, 0.75, 0.85, 1];
const STRENGTH_WEIGHT = [0.2, 0.2, 0.2, 0.3, 0.1];
const LEVELS = [0.5, 0.9, 0.99] as const;

/**
 * Peak wind at places the storm passes straight over, in the run and by the parametrisation: 50, 90, 99 % in units of the
 * mean maximum, averaged over offsets of the path.
 */
export const passages = ({ ring, law, frames }: RingRun, regime: number, seed: number) => {
  const { uniform } = seededRandom(seed);
  const mean = Float64Array.from({ length: RADII }, (_, k) => {
    let sum = 0;
    for (const frame of frames) for (let a = 0; a < AZIMUTHS; a++) sum += frame[k * AZIMUTHS + a]!;
    return sum / frames.length / AZIMUTHS;
  });
  const modes = smoothRingModes(ring.delta, ring.gamma);
  const fastest = modes.reduce((best, mode) => (mode.growth > best.growth ? mode : best));
  const at = (values: ArrayLike<number>, r: number, from = 0, stride = 1) => {
    const place = Math.min(Math.max((r / REACH) * RADII - 0.5, 0), RADII - 1.001);
    const k = Math.floor(place);
    return values[from + k * stride]! * (1 - place + k) + values[from + (k + 1) * stride]! * (place - k);
  };
  const result = [0.6, 0.8, 1, 1.25].flatMap((offset) =>
    [0.08, 0.17].map((speed) => {
      const seen: { value: number; weight: number }[] = [];
      const told: { value: number; weight: number }[] = [];
      for (let n = 0; n < 400; n++) {
        const turn = 2 * Math.PI * uniform();
        const start = uniform() * frames.length;
        const phase = 2 * Math.PI * uniform();
        let most = 0;
        const drawn = STRENGTH.map(() => 0);
        // The maximum wind is half the average vorticity times the outer radius: lengths move at speed / 2 in these units.
        const span = Math.sqrt(REACH * REACH - offset * offset);
        const duration = Math.min((2 * span) / (speed / 2), frames.length - 1);
        for (let t = -duration / 2; t <= duration / 2; t += 0.5) {
          const x = (t * speed) / 2;
          const r = Math.hypot(x, offset);
          if (r > REACH) continue;
          const azimuth = Math.atan2(offset, x) + turn;
          const frame = frames[Math.floor(start + t + 2 * frames.length) % frames.length]!;
          const column = Math.floor((azimuth / (2 * Math.PI) + 2) * AZIMUTHS) % AZIMUTHS;
          most = Math.max(most, at(frame, r, column, AZIMUTHS));
          const crest = radialShape(r) * azimuthalShape(fastest.m * (azimuth - fastest.pattern! * t) - phase);
          const calm = at(mean, r);
          STRENGTH.forEach((u, i) => {
            drawn[i] = Math.max(drawn[i]!, calm + regime * u * law * crest);
          });
        }
        seen.push({ value: most, weight: 1 });
        drawn.forEach((value, i) => told.push({ value, weight: STRENGTH_WEIGHT[i]! }));
      }
      return LEVELS.map((level) => quantile(told, level) - quantile(seen, level));
    }),
  );
  return LEVELS.map((_, i) => result.reduce((sum, off) => sum + off[i]!, 0) / result.length);
};

const quantile = (values: { value: number; weight: number }[], level: number) => {
  const sorted = [...values].sort((a, b) => a.value - b.value);
  const total = sorted.reduce((sum, { weight }) => sum + weight, 0);
  let passed = 0;
  for (const { value, weight } of sorted) {
    passed += weight;
    if (passed >= level * total - 1e-12) return value;
  }
  return sorted.at(-1)!.value;
};
