import { observedAt, VortexObservation } from '#contract/observed-vortices.ts';
import { parseTime } from './fix-columns.ts';

/** An observation while it is typed. */
export interface VortexForm {
  kind: VortexObservation['kind'];
  time: string;
  bearings: string;
  axisBearing: string;
  majorKm: string;
  minorKm: string;
  periodMinutes: string;
  uncertainty: string;
}

export const emptyVortexForm = (time: string | null): VortexForm => ({
  kind: 'maxima',
  time: time === null ? '' : time.slice(0, 16).replace('T', ' '),
  bearings: '',
  axisBearing: '',
  majorKm: '',
  minorKm: '',
  periodMinutes: '',
  uncertainty: '10',
});

/** Bearings as typed: parted by spaces, commas or semicolons, with or without degree signs. */
export const bearingsIn = (text: string): number[] =>
  text
    .split(/[\s,;]+/)
    .filter((part) => part !== '')
    .map((part) => Number(part.replace(/°$/, '')));

const METRES_PER_KM = 1000;
const numberIn = (text: string): number => (text.trim() === '' ? NaN : Number(text.trim().replace(',', '.')));

export type VortexFaults = Partial<Record<keyof VortexForm, string>>;

/** Fields of the form by those of the request. */
const FIELDS: Readonly<Record<string, keyof VortexForm>> = {
  time: 'time',
  uncertaintyDeg: 'uncertainty',
  azimuthsDeg: 'bearings',
  longAxisBearingDeg: 'axisBearing',
  majorM: 'majorKm',
  minorM: 'minorKm',
  rotationPeriodMinutes: 'periodMinutes',
};
/** In the units the form is typed in; the service says the same in its own. */
const IN_WORDS: Readonly<Record<keyof VortexForm, string>> = {
  kind: '',
  time: 'Type a time in UTC as 2026-09-03 06:00.',
  bearings: 'Give 2 to 8 bearings of 0 to 360°, such as 20 110 200 290.',
  axisBearing: 'Give 0 to 360°.',
  majorKm: 'Give 1 to 500 km.',
  minorKm: 'Give 1 to 500 km, not more than the long one.',
  periodMinutes: 'Give 10 to 600 min, or leave it empty.',
  uncertainty: 'Give 1 to 60°.',
};

/** What was typed as an observation, or what is wrong with it by field. */
export const readVortexForm = (form: VortexForm): VortexObservation | VortexFaults => {
  const common = { kind: form.kind, time: parseTime(form.time) ?? '', uncertaintyDeg: numberIn(form.uncertainty) };
  const read = VortexObservation.safeParse(
    form.kind === 'maxima'
      ? { ...common, azimuthsDeg: bearingsIn(form.bearings) }
      : {
          ...common,
          longAxisBearingDeg: numberIn(form.axisBearing),
          majorM: numberIn(form.majorKm) * METRES_PER_KM,
          minorM: numberIn(form.minorKm) * METRES_PER_KM,
          rotationPeriodMinutes: form.periodMinutes.trim() === '' ? null : numberIn(form.periodMinutes),
        },
  );
  if (read.success) return read.data;
  const fields = read.error.issues.flatMap(({ path }) => FIELDS[String(path[0])] ?? []);
  return Object.fromEntries(fields.map((field) => [field, IN_WORDS[field]]));
};

/** One line about an observation. */
export const vortexWords = (seen: VortexObservation): string => {
  const error = `± ${seen.uncertaintyDeg}°`;
  if (seen.kind === 'maxima') {
    return `${observedAt(seen.time)}: ${seen.azimuthsDeg.length} maxima at ${seen.azimuthsDeg.map((one) => `${one}°`).join(', ')} (${error})`;
  }
  const { longAxisBearingDeg, majorM, minorM, rotationPeriodMinutes: minutes } = seen;
  const turning = minutes === null ? '' : `, a turn in ${minutes} min`;
  return `${observedAt(seen.time)}: ellipse of ${majorM / METRES_PER_KM} by ${minorM / METRES_PER_KM} km, long axis ${longAxisBearingDeg}° (${error})${turning}`;
};

/** Where the marks of an observation stand on a compass; null when some of it can’t be read. */
export const bearingsOf = (form: VortexForm): number[] | null => {
  const axis = numberIn(form.axisBearing);
  const bearings = form.kind === 'maxima' ? bearingsIn(form.bearings) : [axis, axis + 180];
  return bearings.length >= 2 && bearings.every(Number.isFinite) ? bearings : null;
};
