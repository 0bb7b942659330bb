import type { RowState, SiteField } from '#contract/portfolios.ts';
import {
  pointOf,
  readSite,
  type Context,
  type Correction,
  type FileFacts,
  type FileRow,
  type Message,
  type Quality,
} from './file-row.ts';
import { homeOf, slipOf } from './home.ts';
import { readCoordinate } from './coordinates.ts';
import { countryNamed } from './countries.ts';
import type { Finding, SurveyRule } from './rule.ts';
import { ROW_RULES, SURVEY_RULES, ruleOf } from './rules.ts';
import { notASite } from './rules/file.ts';
import { qualityOf, sharedPoint } from './rules/place.ts';
import { conflictOf, exactRepeats, sharedReference } from './rules/repeats.ts';

/** What is read off a file before its rows can be judged. */
export function factsOf(rows: readonly FileRow[], known: Omit<FileFacts, 'home' | 'swapped' | 'signLost'>): FileFacts {
  const latitudes = new Float64Array(rows.length);
  const longitudes = new Float64Array(rows.length);
  const positions = new Int32Array(rows.length);
  let count = 0;
  rows.forEach(({ line, received }, index) => {
    if (line !== 'site') return;
    const latitude = readCoordinate(received.latitude, 'latitude', known.decimal);
    const longitude = readCoordinate(received.longitude, 'longitude', known.decimal);
    if (latitude.kind !== 'degrees' || longitude.kind !== 'degrees') return;
    if (latitude.degrees === 0 && longitude.degrees === 0) return;
    if (Math.abs(latitude.degrees) > 180 || Math.abs(longitude.degrees) > 180) return;
    latitudes[count] = latitude.degrees;
    longitudes[count] = longitude.degrees;
    positions[count++] = index;
  });
  const home = homeOf(latitudes.subarray(0, count), longitudes.subarray(0, count));
  let swapped = 0;
  let signLost = 0;
  for (let i = 0; i < count; i++) {
    const country = countryNamed(rows[positions[i]!]!.received.country);
    const slip = slipOf(home, country, latitudes[i]!, longitudes[i]!);
    if (slip === 'swapped') swapped++;
    else if (slip === 'sign lost') signLost++;
  }
  return { ...known, home, swapped, signLost };
}

/** A finding of a survey with the rule that made it. */
export interface Surveyed extends Finding {
  code: string;
}

/** Everything that comparing the rows with each other finds, by position. */
export function surveyRows(rows: readonly FileRow[], facts: FileFacts): Map<number, Surveyed[]> {
  const nothing = new Map<number, never>();
  const aside = notASite.survey(rows, { facts, aside: nothing, repeats: nothing });
  const repeats = exactRepeats(rows, facts, aside);
  const found = new Map<number, Surveyed[]>();
  const add = (rule: SurveyRule, findings: ReadonlyMap<number, Finding>) => {
    for (const [index, finding] of findings) {
      const known = found.get(index);
      const surveyed = { ...finding, code: rule.code };
      if (known) known.push(surveyed);
      else found.set(index, [surveyed]);
    }
  };
  for (const rule of SURVEY_RULES) add(rule, rule === notASite ? aside : rule.survey(rows, { facts, aside, repeats }));
  return found;
}

/** Attributes that a person or the file left open and we filled in. */
const ASSUMABLE = ['construction', 'occupancy', 'terrain'] as const satisfies readonly SiteField[];

/** A row with everything the checks concluded. */
export interface JudgedRow {
  row: number;
  state: RowState;
  ref: string | null;
  latitude: number | null;
  longitude: number | null;
  tivMinor: number;
  messages: Message[];
  /** Codes of the messages that put the row in its state. */
  codes: string[];
  corrected: boolean;
  quality: Quality;
  assumed: string[];
}

/** Orders a row's fate: what sets it aside counts before what holds it, and that before notes. */
const STATE_OF = { set_aside: 'set_aside', hold: 'held', note: 'notes' } as const;

/**
 * Judges one row: reads it, applies its corrections, runs every row rule and adds what the surveys found.
 * Pure, so that a fix and its undo lead back to exactly the state before.
 */
export function judgeRow(
  row: FileRow,
  file: Context,
  surveyed: readonly Surveyed[],
  corrections: readonly Correction[],
): JudgedRow {
  const lifted = (code: string) =>
    corrections.some((correction) => correction.kind === 'keep_all' && correction.code === code);
  const site = readSite(row, file, corrections);
  const messages: Message[] = [];
  for (const { code, field, received, text } of surveyed) {
    if (lifted(code)) continue;
    messages.push({ code, severity: ruleOf(code)!.severity, field, received, text });
  }
  const isAside = ({ severity }: Message) => severity === 'set_aside';
  if (!messages.some(isAside)) {
    for (const rule of ROW_RULES) {
      const finding = rule.check(site, file);
      if (finding) messages.push({ code: rule.code, severity: rule.severity, ...finding });
    }
  }
  // Of a line that isn't scored only the reason matters.
  const shown = messages.some(isAside) ? messages.filter(isAside) : messages;
  const decisive = (['set_aside', 'hold', 'note'] as const).find((severity) =>
    shown.some((message) => message.severity === severity),
  );
  const state = decisive ? STATE_OF[decisive] : 'ready';
  const point = pointOf(site);
  const assumed =
    state === 'ready' || state === 'notes' ? ASSUMABLE.filter((attribute) => site[attribute] === null) : [];
  const isTotal = shown.some(({ code }) => code === notASite.code);
  return {
    row: row.row,
    state,
    ref: isTotal ? null : site.ref,
    latitude: point && !isTotal ? point[0] : null,
    longitude: point && !isTotal ? point[1] : null,
    // A total repeats the lines above it; counted again it would double the file.
    tivMinor: isTotal ? 0 : site.tivMinor,
    messages: shown,
    codes: [...new Set(shown.filter(({ severity }) => severity === decisive).map(({ code }) => code))],
    corrected: corrections.length > 0,
    quality: qualityOf(
      site,
      messages.some(({ code }) => code === sharedPoint.code),
    ),
    assumed,
  };
}

/** Whether a row takes part in the question who else has its reference. */
const competesForReference = (surveyed: readonly Surveyed[], corrections: readonly Correction[]): boolean =>
  !corrections.some(({ kind, code }) => kind === 'exclude' || (kind === 'keep_all' && code === 'SAME-01')) &&
  !surveyed.some(
    ({ code }) =>
      ruleOf(code)!.severity === 'set_aside' &&
      !corrections.some((correction) => correction.kind === 'keep_all' && correction.code === code),
  );

interface Sharing {
  row: FileRow;
  surveyed: readonly Surveyed[];
  corrections: readonly Correction[];
}

/**
 * Asks anew which rows share a reference, after some were excluded, kept or brought back. Takes every row of the
 * references concerned and gives those whose answer changed, with the finding put in or taken out.
 */
export function resurveyReferences<Row extends Sharing>(rows: readonly Row[]): (Row & { surveyed: Surveyed[] })[] {
  const { code } = sharedReference;
  const competing = new Map<string, number[]>();
  const refOf = (row: Row) =>
    competesForReference(row.surveyed, row.corrections) ? (row.row.received.site_ref?.trim() ?? null) : null;
  for (const row of rows) {
    const ref = refOf(row);
    if (!ref) continue;
    const sharing = competing.get(ref);
    if (sharing) sharing.push(row.row.row);
    else competing.set(ref, [row.row.row]);
  }
  return rows.flatMap((row) => {
    const ref = refOf(row);
    const finding = ref ? conflictOf(ref, competing.get(ref)!) : null;
    const before = row.surveyed.find((surveyed) => surveyed.code === code);
    if (before?.text === finding?.text) return [];
    const others = row.surveyed.filter((surveyed) => surveyed.code !== code);
    return [{ ...row, surveyed: finding ? [...others, { ...finding, code }] : others }];
  });
}
