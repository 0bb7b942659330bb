import type { CurveSet, DamageCurve } from '#contract/models.ts';
import type { ChainSettings, SpreadRow } from '#contract/studies.ts';
import { CHAIN_CHOICES, WIND_CHOICES } from '#contract/wind-choice-catalogue.ts';
import type { Choice } from '#contract/wind-choices.ts';
import { DEFAULT_EYE_RATIO, DEFAULT_RING_WIDTH } from '#engine/ring/stability.ts';
import type { ObservedVortices } from '#engine/ring/observed-vortices.ts';
import type { TrackFix } from '#engine/track/fixes.ts';
import { msFromKnots } from '#engine/units.ts';
import type { Trial } from '../../compute/spread.ts';
import { chainOptionsOf } from './study-settings.ts';

/** One thing set otherwise, everything else as asked. */
export interface Switch extends Pick<SpreadRow, 'choice' | 'title' | 'from' | 'to'> {
  trial: Trial;
}

export interface SwitchInputs {
  settings: ChainSettings;
  fixes: readonly TrackFix[];
  observations: readonly ObservedVortices[];
  curve: DamageCurve;
  curveSetId: string | null;
  approved: readonly CurveSet[];
}

/** Every setting that can be set otherwise, one at a time, in the order in which the chain comes to it. */
export const switchesOf = (inputs: SwitchInputs): Switch[] => [
  ...chainSwitches(inputs),
  ...averagingSwitches(inputs),
  ...radiusSwitches(inputs),
  ...shapeOfRingSwitches(inputs),
  ...windSwitches(inputs),
  ...curveSwitches(inputs),
];

/** Those of the eyewall ring and its vortices. */
export const ringSwitches = (inputs: SwitchInputs): Switch[] => {
  const ofRing = ['anchor', 'mesovortices', 'regime'];
  return [...shapeOfRingSwitches(inputs), ...chainSwitches(inputs).filter(({ choice }) => ofRing.includes(choice))];
};

export const baseTrial = ({ settings, fixes, observations, curve }: SwitchInputs): Trial => ({
  fixes,
  observations,
  options: chainOptionsOf(settings),
  curve,
  radiusFactor: 1,
});

const others = (inputs: SwitchInputs, choice: Choice<string>, value: string, set: (to: string) => ChainSettings) => {
  const { key, title, values } = choice;
  const from = values.find((one) => one.value === value)!;
  return values
    .filter((to) => to !== from)
    .map((to): Switch => ({
      choice: key,
      title,
      from: { value: from.value, title: from.title },
      to,
      trial: { ...baseTrial(inputs), options: chainOptionsOf(set(to.value)) },
    }));
};

const chainSwitches = (inputs: SwitchInputs): Switch[] => {
  const { settings } = inputs;
  return CHAIN_CHOICES.flatMap((choice) =>
    choice.key === 'mesovortices'
      ? others(inputs, choice, settings.mesovortices ? 'on' : 'off', (to) => ({
          ...settings,
          mesovortices: to === 'on',
        }))
      : others(inputs, choice, settings[choice.key], (to) => ({ ...settings, [choice.key]: to }) as ChainSettings),
  );
};

const windSwitches = (inputs: SwitchInputs): Switch[] => {
  const { settings } = inputs;
  return WIND_CHOICES.flatMap((choice) =>
    others(
      inputs,
      choice,
      settings.wind[choice.key],
      (to) => ({ ...settings, wind: { ...settings.wind, [choice.key]: to } }) as ChainSettings,
    ),
  );
};

const AVERAGING_TITLES = { 60: '1 min', 120: '2 min', 180: '3 min', 600: '10 min' } as const;

/** As if the track’s winds had been declared otherwise: the mistake that costs 5 %. */
const averagingSwitches = (inputs: SwitchInputs): Switch[] => {
  const declared = inputs.fixes[0]!.windAveragingS;
  const other = declared === 600 ? 60 : 600;
  const value = (period: keyof typeof AVERAGING_TITLES) => ({
    value: String(period),
    title: AVERAGING_TITLES[period],
  });
  return [
    {
      choice: 'reportedAveraging',
      title: 'Reported winds averaged over',
      from: value(declared),
      to: {
        ...value(other),
        source: 'Harper, Kepert & Ginger (2010), WMO/TD-1555, at-sea factors; table from memory',
      },
      trial: { ...baseTrial(inputs), fixes: inputs.fixes.map((fix) => ({ ...fix, windAveragingS: other })) },
    },
  ];
};

const radiusSwitches = (inputs: SwitchInputs): Switch[] =>
  [0.7, 1.4].map((radiusFactor) => ({
    choice: 'radius',
    title: 'Radius of maximum wind',
    from: { value: '1', title: 'As in use' },
    to: {
      value: String(radiusFactor),
      title: `× ${radiusFactor}`,
      source: 'One step within the scatter of the published relations, about 40 % either way',
    },
    trial: { ...baseTrial(inputs), radiusFactor },
  }));

interface RingShape {
  choice: string;
  title: string;
  field: 'ringWidthFraction' | 'eyeVorticityRatio';
  usual: number;
  tried: readonly number[];
  source: string;
}

const RING_SHAPES: readonly RingShape[] = [
  {
    choice: 'ringWidth',
    title: 'Ring width over radius of maximum wind',
    field: 'ringWidthFraction',
    usual: DEFAULT_RING_WIDTH,
    tried: [0.25, DEFAULT_RING_WIDTH, 0.45],
    source: 'A thin, the usual and a broad ring; judged, not measured',
  },
  {
    choice: 'eyeRatio',
    title: 'Eye vorticity over average vorticity',
    field: 'eyeVorticityRatio',
    usual: DEFAULT_EYE_RATIO,
    tried: [0, DEFAULT_EYE_RATIO, 0.4],
    source: 'A still, the usual and a stirred eye; judged, not measured',
  },
];

/** The same ring at every fix, whatever the track or the calibration gives. */
const shapeOfRingSwitches = (inputs: SwitchInputs): Switch[] =>
  RING_SHAPES.flatMap(({ choice, title, field, usual, tried, source }) => {
    const given = inputs.fixes.map((fix) => fix[field] ?? usual);
    const [least, most] = [Math.min(...given), Math.max(...given)];
    const varies = least !== most;
    const from = varies ? { value: 'by-fix', title: `${least} to ${most}, fix by fix` } : ring(least);
    return tried
      .filter((value) => varies || value !== least)
      .map((value): Switch => ({
        choice,
        title,
        from,
        to: { ...ring(value, varies ? ' at every fix' : ''), source },
        trial: { ...baseTrial(inputs), fixes: inputs.fixes.map((fix) => ({ ...fix, [field]: value })) },
      }));
  });

const ring = (value: number, where = '') => ({ value: String(value), title: `${value}${where}` });

/** Half-damage winds of a stronger and a weaker building stock [kt, 1-min], and peak 3-s gust over peak 1-min wind. */
const HALF_KNOTS = [110, 190];
const GUST_OVER_ONE_MINUTE = 1.25;

const curveSwitches = (inputs: SwitchInputs): Switch[] => {
  const { curve, curveSetId, approved } = inputs;
  if (curve.kind === 'emanuel') {
    const title = (halfMs: number) => `${(halfMs / msFromKnots(GUST_OVER_ONE_MINUTE)).toFixed(0)} kt`;
    return HALF_KNOTS.map((knots) => GUST_OVER_ONE_MINUTE * msFromKnots(knots))
      .filter((halfMs) => halfMs > curve.thresholdMs)
      .map((halfMs) => ({
        choice: 'halfDamage',
        title: 'Wind that does half damage',
        from: { value: curve.halfMs.toFixed(1), title: title(curve.halfMs) },
        to: {
          value: halfMs.toFixed(1),
          title: title(halfMs),
          source:
            'Emanuel (2011), Weather, Climate, and Society 3, 261–268, 1-min wind; × 1.25 for 3-s gusts, from memory',
        },
        trial: { ...baseTrial(inputs), curve: { ...curve, halfMs } },
      }));
  }
  return approved
    .filter(({ id }) => id !== curveSetId)
    .map((set) => ({
      choice: 'curveSet',
      title: 'Damage curve',
      from: { value: curveSetId ?? curve.code, title: curve.name },
      to: { value: set.id, title: `${set.name}, version ${set.version}`, source: set.curve.source },
      trial: { ...baseTrial(inputs), curve: set.curve },
    }));
};
