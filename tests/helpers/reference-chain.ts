import type { ResolvedFix } from '#engine/track/fixes.ts';
import type { TestSite } from './worked-storm.ts';

// The joined chain written a second time, slowly and in another way (haversine and bearings throughout, no tables, every
// draw at every time). It starts from resolved fixes and shares no code with the engine.

const R = 6_371_000;
const rad = (deg: number): number => (deg * Math.PI) / 180;
const A_NODES = [0.2, 0.28, 0.34, 0.39, 0.49, 0.56, 0.64, 0.73, 0.83, 0.935, 1.1];
const A_WEIGHTS = [0.15, 0.3, 0.225, 0.105, 0.03, 0.05, 0.045, 0.035, 0.02, 0.03, 0.01];
const E_X = [0, 0.3, 0.4, 0.5, 0.6, 0.7, 0.8, 0.9, 1, 1.1, 1.2, 1.3, 1.4, 1.5, 1.7, 2];
const E_Y = [0, 0.56, 0.73, 0.85, 1.03, 1.15, 1.25, 1.1, 1, 0.87, 0.7, 0.5, 0.35, 0.26, 0.17, 0];

type At = { latitude: number; longitude: number };

function distance(a: At, b: At): number {
  const p = Math.sin(rad(b.latitude - a.latitude) / 2);
  const l = Math.sin(rad(b.longitude - a.longitude) / 2);
  return (
    2 * R * Math.asin(Math.min(1, Math.sqrt(p * p + Math.cos(rad(a.latitude)) * Math.cos(rad(b.latitude)) * l * l)))
  );
}

function bearing(a: At, b: At): number {
  const l = rad(b.longitude - a.longitude);
  const y = Math.sin(l) * Math.cos(rad(b.latitude));
  const x =
    Math.cos(rad(a.latitude)) * Math.sin(rad(b.latitude)) -
    Math.sin(rad(a.latitude)) * Math.cos(rad(b.latitude)) * Math.cos(l);
  return (Math.atan2(y, x) * 180) / Math.PI;
}

function leg(fixes: readonly ResolvedFix[], t: number): number {
  let i = 0;
  while (i < fixes.length - 2 && t >= fixes[i + 1]!.timeS) i++;
  return i;
}

function place(fixes: readonly ResolvedFix[], t: number): At {
  const i = leg(fixes, t);
  const a = fixes[i]!;
  const b = fixes[i + 1]!;
  const w = (t - a.timeS) / (b.timeS - a.timeS);
  const om = distance(a, b) / R;
  const vector = ({ latitude, longitude }: At) => [
    Math.cos(rad(latitude)) * Math.cos(rad(longitude)),
    Math.cos(rad(latitude)) * Math.sin(rad(longitude)),
    Math.sin(rad(latitude)),
  ];
  const va = vector(a);
  const vb = vector(b);
  const p = va.map((x, k) => (Math.sin((1 - w) * om) * x + Math.sin(w * om) * vb[k]!) / Math.sin(om));
  return {
    latitude: (Math.atan2(p[2]!, Math.hypot(p[0]!, p[1]!)) * 180) / Math.PI,
    longitude: (Math.atan2(p[1]!, p[0]!) * 180) / Math.PI,
  };
}

function interpolate(xs: readonly number[], ys: readonly number[], x: number): number {
  if (x <= xs[0]!) return ys[0]!;
  for (let i = 1; i < xs.length; i++) {
    if (x <= xs[i]!) return ys[i - 1]! + ((x - xs[i - 1]!) / (xs[i]! - xs[i - 1]!)) * (ys[i]! - ys[i - 1]!);
  }
  return ys[ys.length - 1]!;
}

/** Result of the slow chain at one site. */
export type ReferenceScores = {
  plain: number;
  timeS: number;
  times: number;
  above25: number;
  above33: number;
  draws: number[];
  mean: number;
  quantile: (q: number) => number;
};

/** Scores one site by the slow chain. `hoursInland` gives the hours at a time [s]; steps as in the options. */
export function referenceScores(
  fixes: readonly ResolvedFix[],
  wavenumber: number | null,
  site: TestSite,
  hoursInland: (t: number) => number,
  step = 300,
  inner = 60,
): ReferenceScores {
  const first = fixes[0]!.timeS;
  const last = fixes[fixes.length - 1]!.timeS;
  const outer: number[] = [];
  for (let t = first; t < last; t += step) outer.push(t);
  outer.push(last);
  const scalar = (t: number, pick: (fix: ResolvedFix) => number): number => {
    const i = leg(fixes, t);
    const w = (t - fixes[i]!.timeS) / (fixes[i + 1]!.timeS - fixes[i]!.timeS);
    return pick(fixes[i]!) + w * (pick(fixes[i + 1]!) - pick(fixes[i]!));
  };
  const near = (t: number): boolean =>
    distance(place(fixes, t), site) < Math.max(2 * scalar(t, (fix) => fix.radiusOfMaxWindM), 60_000);
  const times: number[] = [];
  outer.forEach((t, k) => {
    times.push(t);
    const next = outer[k + 1];
    if (next === undefined || !(near(t) || near(next))) return;
    for (let s = t + inner; s < next; s += inner) times.push(s);
  });

  const tu = 3.12 * 10 ** 0.2;
  const nu = (0.007 + 0.213 * (tu / 3) ** 0.654) / tu;
  const y = Math.sqrt(2 * Math.log(600 * nu));
  const g = (y + 0.577 / y) * (1 - 0.193 * (tu / 3 + 0.1) ** -0.68);
  const cr = (z0: number): number => 0.19 * (z0 / 0.05) ** 0.07 * Math.log(10 / z0);
  const draws = new Array<number>(264).fill(0);
  const gusts: number[] = [];
  for (const t of times) {
    const centre = place(fixes, t);
    const from = Math.max(first, t - 1800);
    const to = Math.min(last, t + 1800);
    const c = distance(place(fixes, from), place(fixes, to)) / (to - from);
    const heading = bearing(place(fixes, from), place(fixes, to));
    const s = centre.latitude < 0 ? -1 : 1;
    const rm = scalar(t, (fix) => fix.radiusOfMaxWindM);
    const f = 2 * 7.292115e-5 * Math.sin(rad(Math.abs(centre.latitude)));
    const dp = Math.max(scalar(t, (fix) => fix.ambientPressurePa) - scalar(t, (fix) => fix.centralPressurePa), 100);
    const ks = (r: number): number => interpolate([100e3, 700e3], [0.9 / 1.05, 0.75 / 1.05], r);
    const vgm = Math.max(scalar(t, (fix) => fix.anchoredMaxWindMs) / 1.05 - 0.55 * c, 5) / ks(rm);
    const bFree = ((vgm * vgm + vgm * f * rm) * 1.15 * Math.E) / dp;
    const b = Math.min(Math.max(bFree, 0.8), 2.5);
    const deficit = (dp * bFree) / b;
    const r = Math.max(distance(centre, site), 1);
    const theta = bearing(centre, site);
    const x = (rm / r) ** b;
    const vg = Math.sqrt(((b * deficit) / 1.15) * x * Math.exp(-x) + ((r * f) / 2) ** 2) - (r * f) / 2;
    const q = r / rm;
    const beta = q < 1 ? 10 * (1 + q) : q < 1.2 ? 20 + 25 * (q - 1) : 25;
    const vortexTo = rad(theta - s * (90 + beta));
    const motionTo = rad(heading - 20 * s);
    const u = ks(r) * vg * Math.sin(vortexTo) + 0.55 * c * Math.sin(motionTo);
    const v = ks(r) * vg * Math.cos(vortexTo) + 0.55 * c * Math.cos(motionTo);
    const wind = Math.hypot(u, v);
    const cd = Math.min(Math.max(0.49 + 0.065 * wind, 1.2), 2.4) / 1000;
    const z0s = 10 * Math.exp(-0.4 / Math.sqrt(cd));
    let weight = 0;
    let ceq = 1;
    let landTurbulence = 0;
    if (site.roughness !== null) {
      const z0 = site.roughness;
      const weights = site.fetch.map((metres) =>
        metres <= 0 ? 0 : Math.min(Math.max(Math.log((0.28 * z0 * (metres / z0) ** 0.8) / 10) / Math.log(60), 0), 1),
      );
      const sector = ((((Math.atan2(-u, -v) * 180) / Math.PI + 360) % 360) / 45) % 8;
      const low = Math.floor(sector);
      weight = weights[low]! * (1 - (sector - low)) + weights[(low + 1) % 8]! * (sector - low);
      ceq = cr(z0) / cr(z0s);
      landTurbulence = 1 / Math.log(10 / z0);
    }
    const seaTurbulence = 1 / Math.log(10 / z0s);
    const factor =
      (1 + weight * (ceq - 1)) * (1 + g * (seaTurbulence + weight * (landTurbulence - seaTurbulence))) * site.hill;
    gusts.push(factor * wind);
    const amplitude = scalar(t, (fix) => fix.amplitude) * Math.exp(-hoursInland(t) / 2);
    const vax = scalar(t, (fix) => fix.axisymmetricMaxWindMs);
    const shape = wavenumber === null ? 0 : interpolate(E_X, E_Y, q);
    const turned = wavenumber === null ? 0 : patternAngle(fixes, t);
    for (let d = 0; d < 264; d++) {
      const start = (2 * Math.PI * ((d % 24) + 0.5)) / 24;
      const phase = (wavenumber ?? 0) * (s * (Math.PI / 2 - rad(theta)) - turned) - start;
      const crest = (Math.cos(phase) + 0.5 * Math.cos(2 * phase)) / 1.5;
      const added = (A_NODES[Math.floor(d / 24)]! * amplitude * vax * shape * crest) / 1.05;
      draws[d] = Math.max(draws[d]!, factor * Math.max(0, wind + added));
    }
  }
  const plain = Math.max(...gusts);
  const weights = draws.map((_, d) => A_WEIGHTS[Math.floor(d / 24)]! / 24);
  const order = draws.map((_, d) => d).sort((a, b) => draws[a]! - draws[b]!);
  return {
    plain,
    timeS: times[gusts.indexOf(plain)]!,
    times: times.length,
    above25: duration(times, gusts, 25),
    above33: duration(times, gusts, 33),
    draws,
    mean: draws.reduce((sum, value, d) => sum + value * weights[d]!, 0),
    quantile: (level) => {
      let sum = 0;
      return draws[order.find((d) => (sum += weights[d]!) >= level - 1e-12)!]!;
    },
  };
}

function patternAngle(fixes: readonly ResolvedFix[], t: number): number {
  // Simpson's rule is exact for the linear rate of a leg.
  let sum = 0;
  for (let i = 0; i + 1 < fixes.length && fixes[i]!.timeS < t; i++) {
    const a = fixes[i]!;
    const b = fixes[i + 1]!;
    const end = Math.min(t, b.timeS);
    const rate = (s: number): number =>
      a.patternRadPerS! + ((b.patternRadPerS! - a.patternRadPerS!) * (s - a.timeS)) / (b.timeS - a.timeS);
    sum += ((end - a.timeS) / 6) * (rate(a.timeS) + 4 * rate((a.timeS + end) / 2) + rate(end));
  }
  return sum;
}

/** Counts fine slices of the broken line above the threshold instead of solving for its crossings. */
function duration(times: readonly number[], gusts: readonly number[], threshold: number): number {
  const slices = 2000;
  let seconds = 0;
  for (let i = 1; i < times.length; i++) {
    const [a, b] = [gusts[i - 1]!, gusts[i]!];
    const span = times[i]! - times[i - 1]!;
    if (a >= threshold && b >= threshold) seconds += span;
    else if (a >= threshold || b >= threshold) {
      let above = 0;
      for (let k = 0; k < slices; k++) if (a + ((k + 0.5) / slices) * (b - a) >= threshold) above++;
      seconds += (span * above) / slices;
    }
  }
  return seconds;
}
