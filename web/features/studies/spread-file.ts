import { NOTICE_VERSION, STANDING_NOTE } from '#contract/notices.ts';
import type { SpreadReply, SpreadRow } from '#contract/studies.ts';
import { minorPerUnit } from '../../lib/money.ts';

/** What a change can’t be read as, said wherever it stands. */
export const SPREAD_NOTE =
  'A chosen spread, not a forecast cone. Real storms differ. Gusts here aren’t design wind speeds. Wind only: no surge or flood.';

const quoted = (text: string) => (/[",\n]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text);

/** The spread as a file: one line the base, one a switch, in m/s and units of the currency, with the cautions in each. */
export const spreadCsv = (reply: SpreadReply): string => {
  const { currency, base } = reply;
  const per = currency === null ? 1 : minorPerUnit(currency);
  const suffix = currency === null ? '' : `_${currency.toLowerCase()}`;
  const money = (minor: number | null | undefined) =>
    minor === null || minor === undefined ? '' : (minor / per).toFixed(Math.round(Math.log10(per)));
  const speed = (metresPerSecond: number | null | undefined) => metresPerSecond?.toFixed(3) ?? '';
  const effect = (row: Pick<SpreadRow, 'peakGustMs' | 'peakGustChangeMs' | 'grossMinor' | 'grossChangeMinor'>) => [
    ...[row.peakGustMs?.plain, row.peakGustMs?.p5, row.peakGustMs?.p50, row.peakGustMs?.p95].map(speed),
    speed(row.peakGustChangeMs),
    ...[row.grossMinor?.plain, row.grossMinor?.p5, row.grossMinor?.p50, row.grossMinor?.p95].map(money),
    money(row.grossChangeMinor),
  ];
  const header = [
    ...['setting', 'from', 'to', 'source_of_to', 'peak_gust_plain_m_s', 'peak_gust_p5_m_s', 'peak_gust_p50_m_s'],
    ...['peak_gust_p95_m_s', 'peak_gust_change_m_s'],
    ...['gross_plain', 'gross_p5', 'gross_p50', 'gross_p95', 'gross_change'].map((name) => `${name}${suffix}`),
    ...['why_no_effect', 'scenario', 'scenario_version', 'engine_version', 'notice_version', 'notice'],
  ];
  const made = [
    reply.scenario.name,
    String(reply.scenario.version),
    reply.engineVersion,
    NOTICE_VERSION,
    `${SPREAD_NOTE} ${STANDING_NOTE}`,
  ];
  const baseLine = [
    ...['base', '', '', ''],
    ...effect({ ...base, peakGustChangeMs: null, grossChangeMinor: null }),
    '',
    ...made,
  ];
  const lines = reply.rows.map((row) => [
    ...[row.title, row.from.title, row.to.title, row.to.source],
    ...effect(row),
    row.reason ?? '',
    ...made,
  ]);
  return [header, baseLine, ...lines].map((line) => line.map(quoted).join(',')).join('\r\n');
};
