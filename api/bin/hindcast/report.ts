import type { ComparedSettings, GustErrors, Resampled, Validation } from '#contract/validation.ts';
import { byStorm, measuresOf, weighted, type Measures, type Pair } from './measures.ts';
import { groundOf, modelledEverywhere, type Hindcast, type Modelled } from './modelled.ts';
import type { Observation } from './observations.ts';
import { readingsOf } from './readings.ts';
import { BOOTSTRAP, centralRange, LEAST_FOR_INTERVAL, resamplesOf } from './resampling.ts';
import { SETTINGS } from './settings.ts';

type Row = { observation: Observation; modelled: Record<ComparedSettings, Modelled> };

const round = (value: number, digits: number) => Number(value.toFixed(digits));
/** Settings whose errors are given by storm and by source class as well. */
const DETAILED: readonly ComparedSettings[] = ['default', 'wind'];
const MS_DIGITS = 2;
const SHARE_DIGITS = 4;

/** Runs every storm under every setting and lays out the published comparison. */
export const hindcastReport = (hindcast: Hindcast): Validation => {
  const ground = new Map(hindcast.observations.map((one) => [one.id, groundOf(hindcast.land, one)]));
  const modelled = SETTINGS.map(({ key, options }) => ({ key, at: modelledEverywhere(hindcast, ground, options) }));
  const rows = hindcast.observations.map((observation): Row => ({
    observation,
    modelled: Object.fromEntries(modelled.map(({ key, at }) => [key, at.get(observation.id)!])) as Row['modelled'],
  }));
  const peaks = rows.filter(({ observation }) => observation.role === 'P');
  const running = rows.filter(({ observation }) => observation.role === 'T');
  const bounds = rows.filter(({ observation }) => observation.role === 'L');
  return {
    settings: SETTINGS.map(({ key, title, meaning }) => ({ key, title, meaning })),
    bootstrap: BOOTSTRAP,
    observations: rows.map(published),
    errors: SETTINGS.flatMap(({ key }) => [
      ...errorsOf(peaks, 'peaks', key),
      ...(['plain', 'enhanced'] as const).map((layer) =>
        errorsIn(running, { settings: key, layer, rows: 'running', group: 'all', name: '', weight: 'observation' }),
      ),
    ]),
    withinBand: SETTINGS.map(({ key }) => ({
      settings: key,
      of: peaks.length,
      count: peaks.filter(({ observation: { standardisedMs }, modelled: { [key]: at } }) => {
        return at.p5Ms <= standardisedMs! && standardisedMs! <= at.p95Ms;
      }).length,
    })),
    belowLowerBound: SETTINGS.map(({ key }) => ({
      settings: key,
      of: bounds.length,
      count: bounds.filter(({ observation, modelled: { [key]: at } }) => at.plainMs < observation.standardisedMs!)
        .length,
    })),
    againstDefault: SETTINGS.slice(1).map(({ key }) => ({
      settings: key,
      meanAbsolute: differenceInMeanAbsolute(pairsOf(peaks, 'default', 'plain'), pairsOf(peaks, key, 'plain')),
    })),
    readings: readingsOf(hindcast, ground).map(({ title, pairs }) => {
      const { bias, meanAbsolute, rmseMs } = measuresOf(weighted([pairs], 'observation'));
      return {
        title,
        count: pairs.length,
        bias: round(bias, SHARE_DIGITS),
        meanAbsolute: round(meanAbsolute, SHARE_DIGITS),
        rmseMs: round(rmseMs, MS_DIGITS),
      };
    }),
  };
};

const published = ({ observation, modelled }: Row): Validation['observations'][number] => {
  const { stormId: _stormId, writtenStandardisedMs: _written, standardisedMs, ...rest } = observation;
  const gusts = (at: Modelled) => ({
    plainMs: round(at.plainMs, MS_DIGITS),
    p5Ms: round(at.p5Ms, MS_DIGITS),
    p50Ms: round(at.p50Ms, MS_DIGITS),
    p95Ms: round(at.p95Ms, MS_DIGITS),
    meanMs: round(at.meanMs, MS_DIGITS),
  });
  return {
    ...rest,
    standardisedMs: standardisedMs === null ? null : round(standardisedMs, MS_DIGITS),
    modelled: {
      default: gusts(modelled.default),
      'relation-width': gusts(modelled['relation-width']),
      wind: gusts(modelled.wind),
      'wind-as-mean': gusts(modelled['wind-as-mean']),
    },
  };
};

const pairsOf = (rows: readonly Row[], settings: ComparedSettings, layer: GustErrors['layer']): Pair[] =>
  rows.map(({ observation, modelled: { [settings]: at } }) => ({
    storm: observation.storm,
    observedMs: observation.standardisedMs!,
    modelledMs: layer === 'plain' ? at.plainMs : at.p50Ms,
  }));

type Asked = Pick<GustErrors, 'settings' | 'layer' | 'rows' | 'group' | 'name' | 'weight'>;

/** All peaks by both weights, then each storm, then each source class. */
const errorsOf = (rows: readonly Row[], kind: GustErrors['rows'], settings: ComparedSettings): GustErrors[] => {
  const detailed = DETAILED.includes(settings) ? rows : [];
  const storms = [...new Set(detailed.map(({ observation }) => observation.storm))];
  const classes = [...new Set(detailed.map(({ observation }) => observation.sourceClass))].sort();
  return (['plain', 'enhanced'] as const).flatMap((layer) => {
    const asked = (group: Asked['group'], name: string, weight: Asked['weight']): Asked => ({
      settings,
      layer,
      rows: kind,
      group,
      name,
      weight,
    });
    return [
      errorsIn(rows, asked('all', '', 'observation')),
      errorsIn(rows, asked('all', '', 'storm')),
      ...storms.map((name) =>
        errorsIn(
          rows.filter(({ observation }) => observation.storm === name),
          asked('storm', name, 'observation'),
        ),
      ),
      ...classes.map((name) =>
        errorsIn(
          rows.filter(({ observation }) => observation.sourceClass === name),
          asked('source-class', name, 'observation'),
        ),
      ),
    ];
  });
};

const errorsIn = (rows: readonly Row[], asked: Asked): GustErrors => {
  const groups = byStorm(pairsOf(rows, asked.settings, asked.layer));
  const whole = measuresOf(weighted(groups, asked.weight));
  const drawn =
    rows.length < LEAST_FOR_INTERVAL
      ? null
      : resamplesOf(groups.map(({ length }) => length)).map((resample) =>
          measuresOf(
            weighted(
              resample.map(({ group, members }) => members.map((member) => groups[group]![member]!)),
              asked.weight,
            ),
          ),
        );
  const of = (measure: keyof Measures, digits: number): Resampled =>
    resampled(whole[measure], drawn?.map((one) => one[measure]) ?? null, digits);
  return {
    ...asked,
    count: rows.length,
    storms: groups.length,
    bias: of('bias', SHARE_DIGITS),
    biasMs: of('biasMs', MS_DIGITS),
    rmseMs: of('rmseMs', MS_DIGITS),
    meanAbsolute: of('meanAbsolute', SHARE_DIGITS),
    scatter: of('scatter', SHARE_DIGITS),
    correlation: drawn === null || Number.isNaN(whole.correlation) ? null : of('correlation', MS_DIGITS),
  };
};

const resampled = (value: number, drawn: readonly number[] | null, digits: number): Resampled => {
  const range = drawn === null ? null : centralRange(drawn);
  return {
    value: round(value, digits),
    low: range && round(range.low, digits),
    high: range && round(range.high, digits),
  };
};

/** Each resample judges both settings, so that what is common to them cancels. */
const differenceInMeanAbsolute = (defaults: readonly Pair[], others: readonly Pair[]): Resampled => {
  const error = ({ observedMs, modelledMs }: Pair) => Math.abs(modelledMs / observedMs - 1);
  const groups = byStorm(defaults.map((pair, i) => ({ storm: pair.storm, gap: error(pair) - error(others[i]!) })));
  const mean = (gaps: readonly { gap: number }[]) => gaps.reduce((sum, { gap }) => sum + gap, 0) / gaps.length;
  const drawn = resamplesOf(groups.map(({ length }) => length)).map((resample) =>
    mean(resample.flatMap(({ group, members }) => members.map((member) => groups[group]![member]!))),
  );
  return resampled(mean(groups.flat()), drawn, SHARE_DIGITS);
};
