import type { Notice } from './common.ts';

/** Version of the cautions below; people accept a version, and accept again when it changes. */
export const NOTICE_VERSION = '2026-12-01';

export const NOTICE_THEMES = [
  {
    code: 'life-safety',
    title: 'Life safety',
    text: 'This is a scenario study for insurance work. It isn’t a forecast, a warning or a guide to evacuation or re-entry. For decisions about people, follow the national meteorological service and local emergency management. Don’t send staff into an area until the authorities have opened it.',
  },
  {
    code: 'engineering',
    title: 'Engineering',
    text: 'Gusts here aren’t design wind speeds. Local building codes and licensed engineers prevail. Nothing here says that a structure will or won’t stand.',
  },
  {
    code: 'uncertainty',
    title: 'Uncertainty',
    text: 'Real storms differ. Where small vortices pass can’t be known ahead; the enhanced field is one of many possible patterns, shown as a range. The range is the spread of one effect, not a prediction interval. A site outside the strongest band can still be damaged.',
  },
  {
    code: 'scope',
    title: 'Scope and data',
    text: 'Wind only. Not surge, flood, rain through intact openings, tornado outbreaks, demand surge, adjustment cost or legal questions of coverage. Results rest on the schedule supplied, including assumed attributes and location quality. Gross depends on the terms entered; whether a deductible is triggered is a policy question.',
  },
  {
    code: 'regulatory',
    title: 'Regulatory',
    text: 'Not reviewed or accepted by any regulator or commission for rate filings. Whoever relies on it under actuarial or solvency rules remains responsible for understanding, testing and documenting the model (ASOP 38 and 39 in the US; validation of internal and external models under Solvency II).',
  },
  {
    code: 'provisional',
    title: 'Provisional tracks',
    text: 'A track taken from an advisory is as of a stated time and is superseded by the next advisory.',
  },
] as const;

export type NoticeCode = (typeof NOTICE_THEMES)[number]['code'];

/** The strip at the foot of every screen, in full and for a phone. */
export const STANDING_NOTE =
  'Scenario study for insurance work: not a forecast, a warning or a guide to evacuation. Gusts here aren’t design wind speeds. Wind only: no surge or flood.';
export const STANDING_NOTE_SHORT = 'A scenario study: not a forecast or a warning. Wind only.';
export const INTAKE_NOTE =
  'Wind only: no surge or flood. Results will rest on the schedule you seal here, with every assumption listed.';
export const ENGINEERING_NOTE = 'Not a design wind speed, and not a statement about how the building will perform.';

/** The cautions named, as they travel in replies and files. */
export const noticesFor = (...codes: NoticeCode[]): Notice[] =>
  NOTICE_THEMES.filter(({ code }) => codes.includes(code)).map(({ code, text }) => ({
    code,
    text,
    version: NOTICE_VERSION,
  }));

/** What every result of a run carries. */
export const RESULT_NOTICES: Notice[] = noticesFor('life-safety', 'engineering', 'uncertainty', 'scope', 'regulatory');
