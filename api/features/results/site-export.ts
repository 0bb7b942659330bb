import { pipeline } from 'node:stream/promises';
import type { Writable } from 'node:stream';
import { Readable } from 'node:stream';
import { stringify } from 'csv-stringify';
import { NOTICE_VERSION } from '#contract/notices.ts';
import type { FinishedTrack } from './result-service.ts';
import type { SiteRecord } from './stored-results.ts';

type Cell = string | number | null;
type Column = readonly [header: string, value: (site: SiteRecord, track: FinishedTrack) => Cell];

/** A spreadsheet takes a text that begins like this for a formula; an apostrophe in front makes it text again. */
const FORMULA_START = /^[=+\-@\t\r\n＝＋－＠]/;
export const safeText = (text: string): string => (FORMULA_START.test(text) ? `'${text}` : text);

const text =
  (pick: (site: SiteRecord) => string): Column[1] =>
  (site) =>
    safeText(pick(site));

const MINOR = 100n;
/** Minor units as an exact decimal, a number in every spreadsheet. */
const money = (minor: number | null): Cell => {
  if (minor === null) return null;
  const cents = BigInt(minor);
  return `${cents / MINOR}.${String(cents % MINOR).padStart(2, '0')}`;
};
const fixed = (value: number | null, digits: number): Cell => (value === null ? null : value.toFixed(digits));
const gust =
  (pick: (site: SiteRecord) => number | null): Column[1] =>
  (site) =>
    fixed(pick(site), 2);
const ratio =
  (pick: (site: SiteRecord) => number | null): Column[1] =>
  (site) =>
    fixed(pick(site), 5);

/** What was observed of the vortices, where results rest on it. */
const conditionedOn = ({ notices }: FinishedTrack): Cell => {
  const said = notices.find(({ code }) => code === 'conditioned-on-observation');
  return said === undefined ? null : safeText(said.text);
};

/** Columns of the export, units in their names. Gusts: peak 3 s at 10 m in the exposure found at the site. */
const columnsFor = (currency: string): readonly Column[] => {
  const unit = currency.toLowerCase();
  return [
    ['site_no', ({ siteNo }) => siteNo],
    ['site_ref', text(({ siteRef }) => siteRef)],
    ['site_label', text(({ label }) => label)],
    ['account_ref', text(({ accountRef }) => accountRef)],
    ['policy_ref', text(({ policyRef }) => policyRef)],
    ['town', text(({ town }) => town)],
    ['region', text(({ region }) => region)],
    ['latitude_deg', ({ latitude }) => fixed(latitude, 6)],
    ['longitude_deg', ({ longitude }) => fixed(longitude, 6)],
    ['location_quality', text(({ locationQuality }) => locationQuality)],
    ['assumed_attributes', text(({ assumed }) => assumed.join(' '))],
    [`tiv_${unit}`, ({ tivMinor }) => money(tivMinor)],
    ['reach', ({ reach }) => reach],
    ['gust_plain_m_s', gust(({ plainMs }) => plainMs)],
    ['gust_enhanced_mean_m_s', gust(({ enhancedMeanMs }) => enhancedMeanMs)],
    ['gust_enhanced_p5_m_s', gust(({ p5Ms }) => p5Ms)],
    ['gust_enhanced_p50_m_s', gust(({ p50Ms }) => p50Ms)],
    ['gust_enhanced_p95_m_s', gust(({ p95Ms }) => p95Ms)],
    ['gust_enhanced_p99_m_s', gust(({ p99Ms }) => p99Ms)],
    [
      'gust_enhanced_mean_less_plain_m_s',
      ({ enhancedMeanMs, plainMs }) =>
        enhancedMeanMs === null || plainMs === null ? null : fixed(enhancedMeanMs - plainMs, 2),
    ],
    ['peak_time_utc', ({ peakTime }) => peakTime],
    ['wind_from_deg', ({ directionDeg }) => fixed(directionDeg, 0)],
    ['hours_above_25_m_s', ({ secondsAbove25 }) => fixed(secondsAbove25 === null ? null : secondsAbove25 / 3600, 2)],
    ['hours_above_33_m_s', ({ secondsAbove33 }) => fixed(secondsAbove33 === null ? null : secondsAbove33 / 3600, 2)],
    ['damage_ratio_plain', ratio(({ damagePlain }) => damagePlain)],
    ['damage_ratio_mean', ratio(({ damageMean }) => damageMean)],
    ['damage_ratio_p5', ratio(({ damageP5 }) => damageP5)],
    ['damage_ratio_p95', ratio(({ damageP95 }) => damageP95)],
    [`ground_up_plain_${unit}`, ({ groundUpPlainMinor }) => money(groundUpPlainMinor)],
    [`ground_up_mean_${unit}`, ({ groundUpMeanMinor }) => money(groundUpMeanMinor)],
    [`gross_plain_${unit}`, ({ grossPlainMinor }) => money(grossPlainMinor)],
    [`gross_mean_${unit}`, ({ grossMeanMinor }) => money(grossMeanMinor)],
    [`gross_p5_${unit}`, ({ grossP5Minor }) => money(grossP5Minor)],
    [`gross_p50_${unit}`, ({ grossP50Minor }) => money(grossP50Minor)],
    [`gross_p95_${unit}`, ({ grossP95Minor }) => money(grossP95Minor)],
    ['run', (_site, { runNumber }) => safeText(runNumber)],
    ['track', (_site, { trackName }) => safeText(trackName)],
    ['track_as_of_utc', (_site, { trackAsOf }) => trackAsOf],
    ['track_age_when_run_h', (_site, { trackAgeHoursWhenRun }) => fixed(trackAgeHoursWhenRun, 1)],
    [
      'track_stale_when_run',
      (_site, track) => (track.trackAsOf === null ? null : track.trackStaleWhenRun ? 'stale' : 'no'),
    ],
    ['conditioned_on', (_site, track) => conditionedOn(track)],
    ['calibration', (_site, { calibration }) => safeText(calibration)],
    ['calibration_state', (_site, { calibrationState }) => safeText(calibrationState)],
    ['engine_version', (_site, { engineVersion }) => safeText(engineVersion)],
    ['notice_version', () => NOTICE_VERSION],
  ];
};

/** Writes sites as CSV while they are read; the same result gives the same bytes, whenever it is written. */
export const writeSites = (track: FinishedTrack, sites: AsyncIterable<SiteRecord>, out: Writable): Promise<void> => {
  const columns = columnsFor(track.currency);
  const records = async function* () {
    for await (const site of sites) yield columns.map(([, value]) => value(site, track));
  };
  return pipeline(
    Readable.from(records()),
    stringify({ header: true, columns: columns.map(([header]) => header), record_delimiter: 'windows' }),
    out,
  );
};
