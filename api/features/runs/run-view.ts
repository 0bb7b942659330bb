import type { LossRange } from '#contract/common.ts';
import type { Calibration, CurveSet } from '#contract/models.ts';
import { noticesFor, RESULT_NOTICES } from '#contract/notices.ts';
import { conditionedLabel } from '#contract/observed-vortices.ts';
import { chosenInWords, regimeInWords } from '#contract/wind-choice-catalogue.ts';
import type { Run, RunEvent, RunScenario, RunSlip, RunSummary } from '#contract/runs.ts';
import type { Notice } from '#contract/common.ts';
import { NOTICE_VERSION } from '#contract/notices.ts';
import { ageWhenRunWords, staleness, trackAgeHours } from '#contract/track-age.ts';
import { toInstantOrNull } from '../../db/mapping.ts';
import type { StoredQuote } from './quote-store.ts';
import type { RunTrack } from './run-ports.ts';
import type { RunRecord, ScenarioRecord } from './run-store.ts';

const lossOf = ({ result }: ScenarioRecord): number => result?.gross?.mean ?? result?.grossPlainMinor ?? -1;

/** The finished track with the largest loss; tracks of a run are alternatives and are never added up. */
const largest = (scenarios: readonly ScenarioRecord[]): ScenarioRecord | null =>
  scenarios
    .filter(({ result }) => result !== null)
    .reduce<ScenarioRecord | null>((best, next) => (best === null || lossOf(next) > lossOf(best) ? next : best), null);

const rangeOf = (scenario: ScenarioRecord | null): LossRange | null => scenario?.result?.gross ?? null;

export const toSummary = (
  run: RunRecord,
  scenarios: readonly ScenarioRecord[],
  names: ReadonlyMap<string, string>,
): RunSummary => {
  const worst = largest(scenarios);
  return {
    id: run.id,
    number: run.number,
    portfolioId: run.portfolioId,
    portfolioName: run.portfolioName,
    editionId: run.editionId,
    editionNumber: run.editionNumber,
    scenarioNames: scenarios.map(({ scenarioVersionId }) => names.get(scenarioVersionId) ?? 'a removed track'),
    state: run.state,
    purpose: run.purpose,
    stamped: run.stamped,
    scenariosDone: scenarios.filter(({ state }) => state === 'stored').length,
    scenariosTotal: scenarios.length,
    currency: run.lossCurrency,
    priceCurrency: run.priceCurrency,
    grossPlainMinor: worst?.result?.grossPlainMinor ?? null,
    gross: rangeOf(worst),
    quotedMinor: run.quotedMinor,
    chargedMinor: run.chargedMinor,
    acceptedAt: run.acceptedAt.toISOString(),
    acceptedBy: run.acceptedBy,
    finishedAt: toInstantOrNull(run.finishedAt),
  };
};

const STAMP: Notice = {
  code: 'calibration-unsigned',
  text: 'The calibration of this run isn’t signed. Exploratory reading only, not for an underwriting file.',
  version: NOTICE_VERSION,
};

/** What every reply about a run carries. */
export const runNotices = (
  { stamped, acceptedAt, options }: Pick<RunRecord, 'stamped' | 'acceptedAt' | 'options'>,
  staleAfterHours: number,
  tracks: readonly Pick<RunTrack, 'asOf' | 'name' | 'track'>[],
): Notice[] => {
  const provisional = tracks
    .flatMap(({ asOf, name }) => (asOf === null ? [] : [{ asOf, name }]))
    .map(({ asOf, name }): Notice => ({
      code: 'provisional',
      text: `${name}: track ${ageWhenRunWords(asOf, acceptedAt, staleAfterHours)}; the next advisory supersedes it.`,
      version: NOTICE_VERSION,
    }));
  return [
    ...(stamped ? [STAMP] : []),
    ...provisional,
    ...(provisional.length > 0 ? noticesFor('provisional') : []),
    ...(options.mesovortices ? tracks.flatMap(conditionedNotice) : []),
    ...RESULT_NOTICES,
  ];
};

const conditionedNotice = ({ name, track }: Pick<RunTrack, 'name' | 'track'>): Notice[] => {
  const label = conditionedLabel(track.vortices);
  if (label === null) return [];
  return [{ code: 'conditioned-on-observation', text: `${name}: ${label}.`, version: NOTICE_VERSION }];
};

/** What stays the same whenever the run is read: how old the advisory was when the run was accepted. */
const ageWhenRun = (asOf: string | null, acceptedAt: Date, staleAfterHours: number) => ({
  asOf,
  ageHoursWhenRun: asOf === null ? null : trackAgeHours(asOf, acceptedAt),
  staleWhenRun: staleness(asOf, acceptedAt, staleAfterHours) !== null,
});

const toScenario = (
  scenario: ScenarioRecord,
  track: RunTrack,
  { run, readAt, staleAfterHours }: WholeRun,
): RunScenario => ({
  id: scenario.id,
  scenarioVersionId: scenario.scenarioVersionId,
  name: track.name,
  version: track.number,
  ...ageWhenRun(track.asOf, run.acceptedAt, staleAfterHours),
  stale: staleness(track.asOf, readAt, staleAfterHours),
  state: scenario.state,
  sitesDone: scenario.sitesDone,
  sitesTotal: scenario.sitesTotal,
  error: scenario.error,
  startedAt: toInstantOrNull(scenario.startedAt),
  finishedAt: toInstantOrNull(scenario.finishedAt),
  restarts: scenario.restarts,
  result: scenario.result,
  path: track.path,
  pathTimes: pathTimes(track),
});

/** The fixes with their times, in longitudes that run on past 180 as the path's do. */
const pathTimes = ({ track }: RunTrack): RunScenario['pathTimes'] => {
  let before: number | null = null;
  return track.fixes.map(({ time, latitude, longitude }) => {
    const turns: number = before === null ? 0 : Math.round((before - longitude) / 360);
    before = longitude + 360 * turns;
    return { time, latitude, longitude: before };
  });
};

export interface WholeRun {
  run: RunRecord;
  scenarios: readonly ScenarioRecord[];
  tracks: ReadonlyMap<string, RunTrack>;
  calibration: Calibration;
  curveSet: CurveSet;
  readAt: Date;
  staleAfterHours: number;
}

export const toRun = (whole: WholeRun): Run => {
  const { run, scenarios, tracks, calibration, curveSet } = whole;
  return {
    ...toSummary(run, scenarios, new Map([...tracks].map(([id, { name }]) => [id, name]))),
    asAt: run.asAt,
    options: run.options,
    calibration: {
      id: calibration.id,
      code: calibration.code,
      version: calibration.version,
      state: calibration.state,
      signedBy: calibration.signedBy,
    },
    curveSet: { id: curveSet.id, name: curveSet.name, version: curveSet.version, note: curveSet.note },
    costCentre: run.costCentre,
    reconciliation: run.reconciliation,
    assumedTivMinor: run.assumedTivMinor,
    assumedSites: run.assumedSites,
    engineVersion: run.engineVersion,
    scenarios: scenarios.map((scenario) => toScenario(scenario, tracks.get(scenario.scenarioVersionId)!, whole)),
    notices: runNotices(run, whole.staleAfterHours, [...tracks.values()]),
  };
};

export const toEvent = (run: Pick<RunRecord, 'id' | 'state'>, scenarios: readonly ScenarioRecord[]): RunEvent => ({
  runId: run.id,
  state: run.state,
  scenarios: scenarios.map(({ id, state, sitesDone, sitesTotal }) => ({ id, state, sitesDone, sitesTotal })),
});

const DRAWS =
  '264 fixed draws: 11 vortex strengths with their weights × 24 starting phases of equal weight; no seed. One draw holds for all sites of a track.';

export const toSlip = (
  { run, scenarios, tracks, calibration, curveSet, staleAfterHours }: WholeRun,
  quote: StoredQuote,
): RunSlip => ({
  run: run.number,
  state: run.state,
  acceptedAt: run.acceptedAt.toISOString(),
  acceptedBy: run.acceptedBy,
  finishedAt: toInstantOrNull(run.finishedAt),
  purpose: run.purpose,
  edition: {
    portfolio: run.portfolioName,
    number: run.editionNumber,
    asAt: run.asAt,
    digest: run.editionDigest,
    sites: quote.lines.readySites,
    held: quote.lines.heldSites,
  },
  scenarios: scenarios.map(({ scenarioVersionId, resultDigest, resolution }) => {
    const { name, number, digest, track, asOf, provenance, conversion } = tracks.get(scenarioVersionId)!;
    return {
      name,
      version: number,
      digest,
      source: provenance,
      ...ageWhenRun(asOf, run.acceptedAt, staleAfterHours),
      windAveragingS: track.declarations.windAveragingS,
      conversion,
      filled: resolution?.filled ?? [],
      resultDigest,
    };
  }),
  calibration: {
    code: calibration.code,
    version: calibration.version,
    // As it stood when the quote was made: a later signature or withdrawal doesn't change what the run rested on.
    state: quote.lines.calibration.state,
    digest: calibration.digest,
  },
  curveSet: { name: curveSet.name, version: curveSet.version, digest: curveSet.digest },
  options: run.options,
  choices: [regimeInWords(run.options.regime), ...chosenInWords(run.options.wind)].filter((words) => words !== null),
  draws: DRAWS,
  engineVersion: run.engineVersion,
  inputsDigest: run.inputsDigest,
  quote: {
    number: quote.number,
    tariffVersion: quote.tariffVersion,
    grossMinor: quote.grossMinor,
    currency: quote.currency,
  },
  chargedMinor: run.chargedMinor,
  notices: runNotices(run, staleAfterHours, [...tracks.values()]),
});
