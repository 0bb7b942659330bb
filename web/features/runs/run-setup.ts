import type { z } from 'zod';
import type { Calibration, CurveSet } from '#contract/models.ts';
import type { Portfolio } from '#contract/portfolios.ts';
import type { Purpose, QuoteRequest, RunOptions } from '#contract/runs.ts';
import type { ScenarioSummary } from '#contract/scenarios.ts';
import { chosenOf, regimeInWords } from '#contract/wind-choice-catalogue.ts';

type Options = z.output<typeof RunOptions>;

/** The six choices of a run while they are being made. */
export interface RunSetup {
  editionId: string | null;
  scenarioVersionIds: readonly string[];
  calibrationId: string | null;
  curveSetId: string | null;
  options: Options;
  purpose: Purpose;
  costCentre: string;
}

export const DEFAULT_OPTIONS: Options = {
  mesovortices: true,
  intensity: 'pressure',
  anchor: 'auto',
  gustThresholdsMs: [40, 50],
};

export const PURPOSES: readonly { value: Purpose; label: string }[] = [
  { value: 'exploratory', label: 'Exploratory' },
  { value: 'underwriting_file', label: 'For underwriting file' },
  { value: 'event', label: 'Event' },
  { value: 'placement', label: 'Placement' },
];
export const purposeLabel = (purpose: Purpose): string => PURPOSES.find(({ value }) => value === purpose)!.label;

export const setupOf = (request: QuoteRequest): RunSetup => ({ ...request });

/** The request as it is sent, null while a choice is open. */
export const requestOf = (setup: RunSetup): QuoteRequest | null => {
  const { editionId, scenarioVersionIds, calibrationId, curveSetId } = setup;
  if (!editionId || scenarioVersionIds.length === 0 || !calibrationId || !curveSetId) return null;
  return {
    ...setup,
    editionId,
    calibrationId,
    curveSetId,
    scenarioVersionIds: [...scenarioVersionIds],
    costCentre: setup.costCentre.trim(),
  };
};

/** The first open choice, in words. */
export const openChoice = (setup: RunSetup): string | null => {
  if (!setup.editionId) return 'Choose a sealed edition.';
  if (setup.scenarioVersionIds.length === 0) return 'Choose at least one track.';
  if (!setup.calibrationId) return 'Choose a calibration.';
  return setup.curveSetId ? null : 'Choose a curve set.';
};

/** A quote is pinned to its inputs: any difference asks for a new one. */
export const isSameRequest = (a: QuoteRequest, b: QuoteRequest): boolean => {
  const flat = (request: QuoteRequest) =>
    JSON.stringify([
      request.editionId,
      [...request.scenarioVersionIds].sort(),
      request.calibrationId,
      request.curveSetId,
      request.options.mesovortices,
      request.options.intensity,
      request.options.anchor,
      request.options.regime ?? 'mixed',
      request.options.gustThresholdsMs,
      chosenOf(request.options.wind),
      request.purpose,
      request.costCentre,
    ]);
  return flat(a) === flat(b);
};

export interface EditionChoice {
  editionId: string;
  portfolioId: string;
  portfolioName: string;
  currency: string;
  number: number;
  isCurrent: boolean;
  asAt: string | null;
  toScore: number;
  held: number;
  heldTivMinor: number;
  tivMinor: number;
}

/** Sealed editions only: a run never uses a draft. */
export const editionChoices = (portfolios: readonly Portfolio[]): EditionChoice[] =>
  portfolios.flatMap((portfolio) =>
    portfolio.editions
      .filter((edition) => edition.state === 'sealed' && edition.reconciliation)
      .sort((a, b) => b.number - a.number)
      .map(({ id, number, asAt, reconciliation }) => ({
        editionId: id,
        portfolioId: portfolio.id,
        portfolioName: portfolio.name,
        currency: portfolio.currency,
        number,
        isCurrent: portfolio.current?.id === id,
        asAt,
        toScore: reconciliation!.ready.rows + reconciliation!.notes.rows,
        held: reconciliation!.held.rows,
        heldTivMinor: reconciliation!.held.tivMinor,
        tivMinor: reconciliation!.ready.tivMinor + reconciliation!.notes.tivMinor,
      })),
  );

/** The signed calibration first, the newest of them; its curve set goes with it. */
export const usualCalibration = (calibrations: readonly Calibration[]): Calibration | null =>
  calibrations.find(({ state }) => state === 'signed') ?? calibrations[0] ?? null;
export const usualCurveSet = (curveSets: readonly CurveSet[], calibration: Calibration | null): CurveSet | null =>
  curveSets.find(({ id }) => id === calibration?.curveSetId) ?? curveSets[0] ?? null;

/** Which of the run's own options depart from what the calibration fixes. */
export const departures = (options: Options, calibration: Calibration | null): string[] => {
  if (!calibration) return [];
  const { settings } = calibration;
  return [
    ...(settings.intensity === options.intensity ? [] : ['intensity']),
    ...(settings.anchor === options.anchor ? [] : ['track wind']),
    ...(regimeInWords(options.regime) === null ? [] : ['amplitude regime']),
  ];
};

export const strongestOf = (scenarios: readonly ScenarioSummary[]): ScenarioSummary | null =>
  scenarios.reduce<ScenarioSummary | null>(
    (best, scenario) => (best === null || scenario.maxWindMs > best.maxWindMs ? scenario : best),
    null,
  );
