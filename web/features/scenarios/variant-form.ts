import type { z } from 'zod';
import type { EnsembleRequest, TrackChange } from '#contract/derivations.ts';
import type { VariantsRequest } from '#contract/variants.ts';
import { decimal } from '../../lib/numbers.ts';

export type Way = 'change' | 'ensemble';
export type ChangeField = keyof TrackChange;
export type SpreadField = keyof EnsembleRequest;

/** Texts as typed: a field under edit may hold no number yet. */
export interface VariantForm {
  way: Way;
  change: Record<ChangeField, string>;
  bothSides: boolean;
  ensemble: Record<SpreadField, string>;
}

export interface FieldLook<Name extends string> {
  name: Name;
  label: string;
  unit: string;
  low: number;
  high: number;
  hint: string;
  /** A whole number only. */
  whole?: true;
}

/** Percentages here, factors on the wire. */
export const CHANGE_FIELDS: readonly FieldLook<ChangeField>[] = [
  { name: 'offsetKm', label: 'Offset', unit: 'km', low: -500, high: 500, hint: 'right of the motion; − is left' },
  { name: 'headingDeg', label: 'Turn', unit: '°', low: -60, high: 60, hint: 'about the first fix; + is clockwise' },
  { name: 'windFactor', label: 'Wind', unit: '%', low: -50, high: 50, hint: 'the pressure moves along' },
  { name: 'speedFactor', label: 'Forward speed', unit: '%', low: -60, high: 150, hint: 'from the first fix on' },
  { name: 'radiusFactor', label: 'Radii', unit: '%', low: -60, high: 150, hint: 'of maximum wind, 34, 50, 64 kt' },
];
export const SPREAD_FIELDS: readonly FieldLook<SpreadField>[] = [
  { name: 'offsetKm', label: 'Offset', unit: 'km', low: 0, high: 200, hint: 'to either side' },
  { name: 'headingDeg', label: 'Turn', unit: '°', low: 0, high: 30, hint: 'about the first fix' },
  { name: 'windLog', label: 'Wind', unit: '%', low: 0, high: 34, hint: 'the pressure moves along' },
  { name: 'speedLog', label: 'Forward speed', unit: '%', low: 0, high: 64, hint: 'from the first fix on' },
  { name: 'radiusLog', label: 'Radii', unit: '%', low: 0, high: 82, hint: 'of maximum wind, 34, 50, 64 kt' },
];
export const SEED_FIELD: FieldLook<SpreadField> = {
  ...{ name: 'seed', label: 'Seed', unit: '', low: 0, high: 2_147_483_647, whole: true },
  hint: 'the same seed gives the same members',
};
export const MEMBERS_FIELD: FieldLook<SpreadField> = {
  ...{ name: 'members', label: 'Members', unit: '', low: 2, high: 20, whole: true },
  hint: 'every second one mirrors the one before',
};

export const FIRST_FORM: VariantForm = {
  way: 'change',
  change: { offsetKm: '40', headingDeg: '0', windFactor: '0', speedFactor: '0', radiusFactor: '0' },
  bothSides: true,
  ensemble: {
    ...{ seed: '1', members: '10', offsetKm: '40', headingDeg: '3' },
    ...{ windLog: '6', speedLog: '10', radiusLog: '15' },
  },
};

/** The number typed, or null when there is none to use. An empty field changes nothing. */
const numberIn = (text: string): number | null => {
  const typed = text.trim().replace('−', '-').replace(',', '.');
  if (typed === '') return 0;
  const value = Number(typed);
  return Number.isFinite(value) ? value : null;
};

/** Why a field can't be used as it stands. */
export const faultOf = (text: string, { low, high, whole }: FieldLook<string>): string | undefined => {
  const value = numberIn(text);
  if (value === null) return 'Type a number.';
  if (value < low || value > high) return `Between ${decimal(low, 0)} and ${decimal(high, 0)}.`;
  return whole && !Number.isInteger(value) ? 'A whole number.' : undefined;
};

const factorOf = (percent: number) => Math.round((1 + percent / 100) * 1000) / 1000;
const logOf = (percent: number) => Math.log(1 + percent / 100);

type Request = Omit<z.output<typeof VariantsRequest>, 'version'>;

/** What to ask for, or why there is nothing to ask yet. */
export const requestOf = ({ way, change, bothSides, ensemble }: VariantForm): Request | { missing: string } => {
  const fields: readonly FieldLook<string>[] =
    way === 'change' ? CHANGE_FIELDS : [SEED_FIELD, MEMBERS_FIELD, ...SPREAD_FIELDS];
  const texts: Record<string, string> = way === 'change' ? change : ensemble;
  if (fields.some((field) => faultOf(texts[field.name]!, field) !== undefined))
    return { missing: 'Correct the marked field.' };
  const typed = (name: string) => numberIn(texts[name]!)!;
  if (way === 'ensemble') {
    const asked = {
      ...{ seed: typed('seed'), members: typed('members'), offsetKm: typed('offsetKm') },
      ...{ headingDeg: typed('headingDeg'), windLog: logOf(typed('windLog')) },
      ...{ speedLog: logOf(typed('speedLog')), radiusLog: logOf(typed('radiusLog')) },
    };
    const spreads = SPREAD_FIELDS.some(({ name }) => asked[name] > 0);
    return spreads ? { ensemble: asked } : { missing: 'Give at least one spread above 0.' };
  }
  const one: TrackChange = {
    ...{ offsetKm: typed('offsetKm'), headingDeg: typed('headingDeg') },
    windFactor: factorOf(typed('windFactor')),
    speedFactor: factorOf(typed('speedFactor')),
    radiusFactor: factorOf(typed('radiusFactor')),
  };
  if (CHANGE_FIELDS.every(({ name }) => typed(name) === 0)) return { missing: 'Change something to see a variant.' };
  return { changes: bothSides && one.offsetKm !== 0 ? [one, { ...one, offsetKm: -one.offsetKm }] : [one] };
};
