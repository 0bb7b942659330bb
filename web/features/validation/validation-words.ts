import type {
  ComparedObservation,
  GustErrors,
  ObservationRole,
  Resampled,
  SourceClass,
  Validation,
} from '#contract/validation.ts';
import { decimal, range, signed } from '../../lib/numbers.ts';

export const ROLE_WORDS: Record<ObservationRole, { name: string; meaning: string }> = {
  P: { name: 'Peak, scored', meaning: 'the storm’s highest gust there; counts in every figure' },
  Q: { name: 'Peak, doubtful', meaning: 'roof, ship, private or disputed; shown, not scored' },
  T: { name: 'Up to a time', meaning: 'reported before the peak; compared with the highest gust until then' },
  L: { name: 'Lower bound', meaning: 'the record is partial; only a gust below it is an error' },
  S: { name: 'Mean wind only', meaning: 'no gust was reported' },
  D: { name: 'Second report', meaning: 'of a place already listed; not scored' },
  X: { name: 'Not usable', meaning: 'place unknown, unconfirmed or on a mountain; not scored' },
};

export const SOURCE_WORDS: Record<SourceClass, string> = {
  A: 'Agency or paper',
  B: 'Agency text, on another site',
  C: 'News or weblog',
  M: 'From memory',
};

const SPACE = '\u00a0';
export const signedShare = (share: number): string => `${signed(100 * share, 1)}${SPACE}%`;
export const share = (value: number): string => `${decimal(100 * value, 1)}${SPACE}%`;
/** "−1.3 to 12.7 %": the range that holds 95 % of the resamples. */
export const shareRange = ({ low, high }: Resampled): string | null =>
  low === null || high === null ? null : `${range(decimal(100 * low, 1), decimal(100 * high, 1))}${SPACE}%`;

type Asked = Partial<Pick<GustErrors, 'layer' | 'rows' | 'group' | 'name' | 'weight'>> & Pick<GustErrors, 'settings'>;
const ALL = { layer: 'plain', rows: 'peaks', group: 'all', name: '', weight: 'observation' } as const;

/** One set of errors; what isn't said is: plain, peaks, all of them, each observation alike. */
export const errorsFor = ({ errors }: Validation, asked: Asked): GustErrors => {
  const wanted = { ...ALL, ...asked };
  const keys = Object.keys(wanted) as (keyof typeof wanted)[];
  const found = errors.find((one) => keys.every((key) => one[key] === wanted[key]));
  if (!found) throw new Error(`no errors for ${JSON.stringify(wanted)}`);
  return found;
};

/** Names of a group in the order in which they were published. */
export const namesOf = ({ errors }: Validation, group: GustErrors['group']): string[] => [
  ...new Set(errors.filter((one) => one.group === group).map(({ name }) => name)),
];

/** Modelled over observed less one, where the two can be compared. */
export const residualOf = ({ role, standardisedMs }: ComparedObservation, modelledMs: number): number | null =>
  standardisedMs === null || role === 'S' ? null : modelledMs / standardisedMs - 1;

/** A difference of two shares, in percentage points. */
export const points = (difference: number): string => `${signed(100 * difference, 1)} points`;

const BASIS_WORDS: Record<string, string> = {
  memory: 'recalled',
  town: 'taken at the town centre',
  area: 'an area only',
};

/** What is known of where and how a wind was measured, in few words. */
export const honestyOf = (one: ComparedObservation): string =>
  [
    one.how === 'found' ? 'Wind read in a public text' : 'Wind recalled, not read',
    `place ${BASIS_WORDS[one.placeBasis] ?? one.placeBasis}`,
    one.heightM === null ? 'height not stated, 10 m assumed' : `height ${decimal(one.heightM, 1)} m`,
    one.gustAveragingS === null ? 'averaging not stated, 3 s assumed' : `${one.gustAveragingS}-s gust`,
  ].join('; ');
