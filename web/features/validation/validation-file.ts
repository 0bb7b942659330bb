import { NOTICE_VERSION, STANDING_NOTE } from '#contract/notices.ts';
import type { Validation } from '#contract/validation.ts';
import { honestyOf, residualOf, ROLE_WORDS, SOURCE_WORDS } from './validation-words.ts';

export const VALIDATION_NOTE =
  'Past storms, a coarse check on open data. The enhanced band isn’t a prediction interval. Wind only: no surge or flood.';

const quoted = (text: string) => (/[",\n]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text);
const speed = (metresPerSecond: number | null) => metresPerSecond?.toFixed(2) ?? '';

/** Every station as a file, in m/s, with the cautions in each line. */
export const validationCsv = ({ observations, settings }: Validation): string => {
  const header = [
    ...['id', 'storm', 'station', 'latitude', 'longitude', 'role', 'source_class', 'marks', 'roughness_length_m'],
    ...['gust_reported_m_s', 'gust_10_m_3_s_m_s', 'sustained_m_s', 'time_utc', 'compare_until_utc'],
    ...settings.flatMap(({ key }) => {
      const name = key.replaceAll('-', '_');
      return [`${name}_plain_m_s`, `${name}_p5_m_s`, `${name}_p50_m_s`, `${name}_p95_m_s`, `${name}_plain_residual`];
    }),
    ...['source', 'source_url', 'note', 'notice_version', 'notice'],
  ];
  const lines = observations.map((one) => [
    ...[one.id, one.storm, one.station, String(one.latitude), String(one.longitude)],
    ...[ROLE_WORDS[one.role].name, SOURCE_WORDS[one.sourceClass], honestyOf(one)],
    one.roughnessLengthM === null ? 'sea' : String(one.roughnessLengthM),
    ...[speed(one.gustMs), speed(one.standardisedMs), speed(one.sustainedMs)],
    ...[one.timeUtc ?? '', one.compareUntilUtc ?? ''],
    ...settings.flatMap(({ key }) => {
      const at = one.modelled[key];
      const residual = residualOf(one, at.plainMs);
      return [at.plainMs, at.p5Ms, at.p50Ms, at.p95Ms].map(speed).concat(residual?.toFixed(4) ?? '');
    }),
    ...[one.source, one.sourceUrl ?? '', one.note, NOTICE_VERSION, `${VALIDATION_NOTE} ${STANDING_NOTE}`],
  ]);
  return [header, ...lines].map((line) => line.map(quoted).join(',')).join('\r\n');
};
