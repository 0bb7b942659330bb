import { observedAt, type VortexObservation } from '#contract/observed-vortices.ts';
import type { Fix, ResolvedFix, Track, TrackFinding } from '#contract/scenarios.ts';
import { greatCircleDistance } from '#engine/geo/geodesy.ts';
import { METRES_PER_NAUTICAL_MILE, PA_PER_HPA, PA_PER_INCH_OF_MERCURY } from '#engine/units.ts';
import { fixList, momentWords, plain } from './reading/track-wording.ts';

/** Says what it saw, why it matters and what to do; `fix` is the index of the fix concerned, or null. */
type Finding = Pick<TrackFinding, 'fix' | 'text'>;

/** A check of the track as entered. */
export type EntryRule = {
  code: string;
  severity: TrackFinding['severity'];
  title: string;
  check: (fixes: readonly Fix[]) => Finding[];
};

/** A check that needs the resolved track beside the entered one. */
export type ResolvedRule = {
  code: string;
  severity: TrackFinding['severity'];
  title: string;
  check: (fixes: readonly ResolvedFix[]) => Finding[];
};

const FASTEST_MS = 35;
const EQUATOR_DEG = 5;
/** The longest-lived storms on record lasted a little over a month. */
const LONGEST_DAYS = 45;
const TROPICS_DEG = 60;
const PRESSURE_HPA = { least: 850, most: 1025 };
const AMBIENT_HPA = { least: 950, most: 1040 };
/** Inches of mercury a barometer can show at sea level. */
const MERCURY_INCHES = { least: 25, most: 32 };
/** Reported over pressure-implied wind beyond which the unit itself is doubtful; a knot is 0.51 m/s. */
const UNIT_DOUBT = { least: 0.62, most: 1.6 };

const at = (fix: Fix, index: number) => `Fix ${index + 1} (${momentWords(fix.time)})`;
const seconds = (fix: Fix) => Date.parse(fix.time) / 1000;

/** One finding for each fix that gives a text. */
const eachFix = (say: (fix: Fix, index: number, before: Fix | undefined) => string | null) => (fixes: readonly Fix[]) =>
  fixes.flatMap((fix, index) => {
    const text = say(fix, index, fixes[index - 1]);
    return text === null ? [] : [{ fix: index, text }];
  });

/** One finding for all fixes that fit, so that forty repeats of one slip are one line. */
const together =
  <T>(fits: (fix: T) => boolean, say: (are: string) => string) =>
  (fixes: readonly T[]): Finding[] => {
    const numbers = fixes.flatMap((fix, index) => (fits(fix) ? [index + 1] : []));
    if (numbers.length === 0) return [];
    return [{ fix: numbers.length === 1 ? numbers[0]! - 1 : null, text: say(fixList(numbers)) }];
  };

const looksLikeMercury = (value: number | null) =>
  value !== null && value >= MERCURY_INCHES.least && value <= MERCURY_INCHES.most;
const inHpa = (inches: number) => plain((inches * PA_PER_INCH_OF_MERCURY) / PA_PER_HPA);

const pressureFault = (name: string, value: number | null, range: { least: number; most: number }): string | null => {
  if (value === null || looksLikeMercury(value) || (value >= range.least && value <= range.most)) return null;
  const scaled = [10, 0.01].find((factor) => value * factor >= range.least && value * factor <= range.most);
  const guess = scaled === 10 ? 'It may be in kPa. ' : scaled === 0.01 ? 'It may be in Pa. ' : '';
  return `${name} ${plain(value)} hPa is outside ${range.least}–${range.most} hPa. ${guess}The wind would be wrong. Write it in hPa, or leave it empty.`;
};

const span = (
  field: 'maxWindMs' | 'radiusOfMaxWindM' | 'ringWidthFraction' | 'eyeVorticityRatio' | 'hoursInland',
  name: string,
  least: number,
  most: number,
  show: (value: number) => string,
) => ({
  name,
  say: (fix: Fix) => {
    const value = fix[field];
    if (value === null || (value >= least && value <= most)) return null;
    return `${name} ${show(value)} is outside ${show(least)} to ${show(most)}. Check its unit, or leave it empty.`;
  },
});
const SPANS = [
  span('maxWindMs', 'maximum wind', 0, 110, (ms) => `${plain(ms)} m/s`),
  span('radiusOfMaxWindM', 'radius of maximum wind', 3_000, 1_000_000, (m) => `${plain(m / 1000)} km`),
  span('ringWidthFraction', 'ring width', 0.1, 0.45, (share) => plain(share, 3)),
  span('eyeVorticityRatio', 'eye vorticity ratio', 0, 0.6, (share) => plain(share, 3)),
  span('hoursInland', 'hours inland', 0, 240, (hours) => `${plain(hours)} h`),
];
/** Widest radius believed of each wind [m]. */
const WIDEST = [
  { field: 'radius34KtM', knots: 34, metres: 800 * METRES_PER_NAUTICAL_MILE },
  { field: 'radius50KtM', knots: 50, metres: 600 * METRES_PER_NAUTICAL_MILE },
  { field: 'radius64KtM', knots: 64, metres: 400 * METRES_PER_NAUTICAL_MILE },
] as const;

const CHECKS_BEFORE_RESOLVING: EntryRule[] = [
  {
    code: 'TRACK-01',
    severity: 'refuse',
    title: 'One fix only',
    check: (fixes) =>
      fixes.length >= 2
        ? []
        : [{ fix: null, text: 'The track has one fix. Without a second there is no heading and no speed. Add a fix.' }],
  },
  {
    code: 'TRACK-02',
    severity: 'consent',
    title: 'Times out of order',
    check: eachFix((fix, index, before) =>
      before && seconds(fix) < seconds(before)
        ? `${at(fix, index)} is earlier than the fix before it, ${momentWords(before.time)}. Order sets heading and speed. Sort the track by time, or correct the time.`
        : null,
    ),
  },
  {
    code: 'TRACK-03',
    severity: 'refuse',
    title: 'The same time twice',
    check: (fixes) => {
      const first = new Map<number, number>();
      return fixes.flatMap((fix, index) => {
        const earlier = first.get(seconds(fix));
        if (earlier === undefined) {
          first.set(seconds(fix), index);
          return [];
        }
        const text = `Fixes ${earlier + 1} and ${index + 1} are both at ${momentWords(fix.time)}. A storm is in one place at a time. Remove one or correct its time.`;
        return [{ fix: index, text }];
      });
    },
  },
  {
    code: 'TRACK-04',
    severity: 'refuse',
    title: 'Pressure in inches of mercury',
    check: eachFix((fix, index) => {
      const value = [fix.centralPressureHpa, fix.ambientPressureHpa].find(looksLikeMercury) ?? null;
      if (value === null) return null;
      return `${at(fix, index)}: pressure ${plain(value, 2)} looks like inches of mercury, not hPa. In hPa it would be ${inHpa(value)}. Convert the column and enter it again.`;
    }),
  },
  {
    code: 'TRACK-05',
    severity: 'refuse',
    title: 'Pressure out of range',
    check: eachFix((fix, index) => {
      const central = pressureFault('central pressure', fix.centralPressureHpa, PRESSURE_HPA);
      const ambient = pressureFault('pressure outside', fix.ambientPressureHpa, AMBIENT_HPA);
      const found = central ?? ambient;
      return found === null ? null : `${at(fix, index)}: ${found}`;
    }),
  },
  {
    code: 'TRACK-09',
    severity: 'refuse',
    title: 'Neither pressure nor wind',
    check: eachFix((fix, index) =>
      fix.centralPressureHpa === null && fix.maxWindMs === null
        ? `${at(fix, index)} has neither a central pressure nor a maximum wind. Its strength can’t be known. Give one of them, or remove the fix.`
        : null,
    ),
  },
  {
    code: 'TRACK-12',
    severity: 'refuse',
    title: 'A value out of range',
    check: (fixes) =>
      fixes.flatMap((fix, index) => {
        const said = SPANS.map(({ say }) => say(fix)).filter((text) => text !== null);
        if (Math.abs(fix.latitude) > TROPICS_DEG) {
          said.push(
            `latitude ${plain(fix.latitude, 2)}° is beyond ${TROPICS_DEG}°, outside what a tropical wind field can say. End the track earlier.`,
          );
        }
        for (const { field, knots, metres } of WIDEST) {
          if (!fix[field]?.some((radius) => radius > metres)) continue;
          said.push(`a ${knots}-kt radius is over ${plain(metres / 1000)} km. Check its unit, or leave it empty.`);
        }
        return said.map((text) => ({ fix: index, text: `${at(fix, index)}: ${text}` }));
      }),
  },
  {
    code: 'TRACK-18',
    severity: 'refuse',
    title: 'Too long a track',
    check: (fixes) => {
      const times = fixes.map(seconds);
      const days = times.length === 0 ? 0 : (Math.max(...times) - Math.min(...times)) / 86_400;
      if (days <= LONGEST_DAYS) return [];
      const text = `The track lasts ${plain(days, 0)} days. No storm has lasted ${LONGEST_DAYS}, and every step between would be computed. Look for a wrong year or month, or for two storms in one track.`;
      return [{ fix: null, text }];
    },
  },
  {
    code: 'TRACK-07',
    severity: 'note',
    title: 'A jump of impossible speed',
    check: eachFix((fix, index, before) => {
      const elapsed = before ? seconds(fix) - seconds(before) : 0;
      if (!before || elapsed <= 0) return null;
      const speed = greatCircleDistance(before, fix) / elapsed;
      if (speed <= FASTEST_MS) return null;
      return `Fix ${index} to ${index + 1}: the centre would move ${plain(speed, 0)} m/s. Storms seldom pass ${FASTEST_MS} m/s, and the speed is part of the wind. Look for a lost sign, a lost W or a wrong hour.`;
    }),
  },
  {
    code: 'TRACK-08',
    severity: 'note',
    title: 'Near the equator',
    check: together<Fix>(
      ({ latitude }) => Math.abs(latitude) < EQUATOR_DEG,
      (are) =>
        `${are} within ${EQUATOR_DEG}° of the equator. The wind formulas rest on the earth’s rotation, which fades there. Don’t rely on gusts near those fixes.`,
    ),
  },
];

const CHECKS_AFTER_RESOLVING: ResolvedRule[] = [
  {
    code: 'TRACK-06',
    severity: 'note',
    title: 'Wind in another unit',
    check: (fixes) => {
      const ratios = fixes
        .filter(({ reportedMaxWindMs, pressureImpliedMaxWindMs }) => reportedMaxWindMs && pressureImpliedMaxWindMs)
        .map(({ reportedMaxWindMs, pressureImpliedMaxWindMs }) => reportedMaxWindMs! / pressureImpliedMaxWindMs!)
        .sort((a, b) => a - b);
      const median = ratios[Math.floor(ratios.length / 2)];
      if (median === undefined || ratios.length < 2 || (median < UNIT_DOUBT.most && median > UNIT_DOUBT.least))
        return [];
      const guess =
        median >= UNIT_DOUBT.most
          ? 'Were they in knots or mph and entered as m/s?'
          : 'Were they in m/s and entered as knots?';
      return [
        {
          fix: null,
          text: `The winds are ${plain(median, 2)} times what the pressures imply at half of the fixes. ${guess} Check the unit. Where a pressure is given the wind isn’t used unless you choose it.`,
        },
      ];
    },
  },
  {
    code: 'TRACK-13',
    severity: 'note',
    title: 'Over land',
    check: together<ResolvedFix>(
      ({ overLand }) => overLand,
      (are) =>
        `${are} over land by the land polygons. Hours inland are counted from the coast, or from the first fix when the track starts there, and weaken the vortices. Type over them if you know better.`,
    ),
  },
];

/** Every rule, for the help pages and the tests. TRACK-10 is the engine's own; 11 and 14 to 17 belong to reading. */
const ENTRY_RULES: readonly EntryRule[] = CHECKS_BEFORE_RESOLVING;
const RESOLVED_RULES: readonly ResolvedRule[] = CHECKS_AFTER_RESOLVING;

/** Puts the fixes in time order; the same array when they already are. */
const sortedByTime = (fixes: readonly Fix[]): Fix[] => [...fixes].sort((a, b) => seconds(a) - seconds(b));

/** TRACK-19: the pattern of vortices can't be followed to a time at which there is no storm. */
const observationsOutside = (fixes: readonly Fix[], vortices: readonly VortexObservation[]): TrackFinding[] => {
  const times = fixes.map(seconds);
  const [first, last] = [Math.min(...times), Math.max(...times)];
  const within = `${observedAt(new Date(first * 1000).toISOString())} to ${observedAt(new Date(last * 1000).toISOString())}`;
  return vortices.flatMap(({ time }, index): TrackFinding[] => {
    const at = Date.parse(time) / 1000;
    if (at >= first && at <= last) return [];
    const text = `Observation ${index + 1} of vortices is at ${observedAt(time)}, outside the track. Its pattern can’t be followed to the storm. Give a time from ${within}, or remove it.`;
    return [{ code: 'TRACK-19', severity: 'refuse', fix: null, text }];
  });
};

/** Findings of the track as entered. With consent, a disorder has been mended and is only noted. */
export const checkEntry = (
  fixes: readonly Fix[],
  sortByTime: boolean,
  vortices: readonly VortexObservation[] = [],
): { fixes: Fix[]; findings: TrackFinding[] } => {
  const ordered = sortByTime ? sortedByTime(fixes) : [...fixes];
  const moved = ordered.filter((fix, index) => fix !== fixes[index]).length;
  const findings = ENTRY_RULES.flatMap(({ code, severity, check }) =>
    check(ordered).map((finding) => ({ code, severity, ...finding })),
  );
  findings.push(...observationsOutside(ordered, vortices));
  if (moved > 0) {
    findings.push({
      code: 'TRACK-16',
      severity: 'note',
      fix: null,
      text: `The fixes were put in order of time as you asked; ${moved} of ${ordered.length} moved.`,
    });
  }
  return { fixes: ordered, findings };
};

/** Findings that need the resolved track. */
export const checkResolved = (fixes: readonly ResolvedFix[]): TrackFinding[] =>
  RESOLVED_RULES.flatMap(({ code, severity, check }) =>
    check(fixes).map((finding) => ({ code, severity, ...finding })),
  );

/** Whether a track with these findings may be saved. */
export const isSavable = (findings: readonly TrackFinding[]): boolean =>
  findings.every(({ severity }) => severity === 'note');

/** What happens to the winds on their way to a 1-min wind, as the run slip says it. */
export const averagingConversion = ({ declarations }: Track): string => {
  switch (declarations.windAveragingS) {
    case 60:
      return 'Wind is a 1-min mean: no conversion';
    case 120:
      return '2-min to 1-min wind × 1.05/1.02 (WMO/TD-1555, at sea)';
    case 180:
      return '3-min to 1-min wind × 1.05 (WMO/TD-1555, at sea)';
    case 600:
      return '10-min to 1-min wind × 1.05 (WMO/TD-1555, at sea)';
  }
};
