import type { FileRule, Rule, RowRule, SurveyRule } from './rule.ts';
import * as building from './rules/building.ts';
import * as corrections from './rules/corrections.ts';
import * as file from './rules/file.ts';
import * as place from './rules/place.ts';
import * as repeats from './rules/repeats.ts';
import * as terms from './rules/terms.ts';
import * as value from './rules/value.ts';

/** Rules that look at one row, in the order in which their messages are shown. */
export const ROW_RULES: readonly RowRule[] = [
  place.noCoordinates,
  place.unusable,
  place.metres,
  place.swapped,
  place.signLost,
  place.nullIsland,
  place.farOffshore,
  place.nearOffshore,
  place.otherCountry,
  place.sexagesimal,
  place.coarse,
  value.nothingToScore,
  value.negative,
  value.notANumber,
  value.anotherCurrency,
  value.totalDiffers,
  value.totalOnly,
  terms.deductibleUnit,
  terms.deductibleBasis,
  terms.deductibleUnreadable,
  terms.limitUnreadable,
  building.constructionMissing,
  building.occupancyMissing,
  building.terrainMissing,
  building.wordUnlisted,
  building.yearImpossible,
  building.tallWood,
  repeats.referenceMissing,
  corrections.swappedBack,
  corrections.signChanged,
  corrections.confirmedAtSea,
  corrections.repeatKept,
  corrections.linePutBack,
  corrections.excluded,
];

/** Rules that compare rows with each other; what they find is kept with the row. */
export const SURVEY_RULES: readonly SurveyRule[] = [
  file.notASite,
  repeats.exactRepeat,
  repeats.probableRepeat,
  place.sharedPoint,
  // Last, as asking it anew after a fix puts its finding last, too.
  repeats.sharedReference,
];

/** Rules that judge the file as a whole. */
export const FILE_RULES: readonly FileRule[] = [
  file.decimalStyle,
  file.thousands,
  file.controlTotals,
  file.currencies,
  file.deductibleUnmapped,
  file.constructionShare,
  file.occupancyShare,
  file.terrainShare,
];

const byCode = new Map<string, Rule>();
for (const rule of [...ROW_RULES, ...SURVEY_RULES, ...FILE_RULES])
  if (!byCode.has(rule.code)) byCode.set(rule.code, rule);

/** The rule of a code; the row rule where rows and file share one. */
export const ruleOf = (code: string): Rule | null => byCode.get(code) ?? null;
