import { createHash } from 'node:crypto';
import type { Calibration, CurveSet } from '#contract/models.ts';
import type { RunOptions } from '#contract/runs.ts';
import { chosenInWords, chosenOf, regimeInWords } from '#contract/wind-choice-catalogue.ts';
import type { TrackFix } from '#engine/track/fixes.ts';
import { DEFAULT_OPTIONS, type ChainOptions } from '#engine/track/options.ts';
import type { EditionHeader, RunTrack } from './run-ports.ts';

/** Everything the numbers of a run rest on, each by its content. */
export interface RunInputs {
  edition: Pick<EditionHeader, 'digest'>;
  tracks: readonly Pick<RunTrack, 'digest'>[];
  calibration: Pick<Calibration, 'digest'>;
  curveSet: Pick<CurveSet, 'digest'>;
  options: RunOptions;
}

/**
 * Name of a run's inputs: equal inputs, equal digest, whatever the order of the tracks. Purpose and cost centre move no
 * number and are left out. A run slip holds every part, so anybody can work it out again.
 */
export const inputsDigest = ({ edition, tracks, calibration, curveSet, options }: RunInputs): string => {
  const chosen = chosenOf(options.wind);
  const regime = regimeInWords(options.regime) === null ? [] : [['regime', options.regime]];
  return createHash('sha256')
    .update(
      JSON.stringify([
        'run inputs 1',
        edition.digest,
        tracks.map(({ digest }) => digest).sort(),
        calibration.digest,
        curveSet.digest,
        [options.mesovortices, options.intensity, options.anchor, options.gustThresholdsMs],
        // Absent when every choice is the default, so that runs from before there was a choice keep their name.
        ...(chosen.length + regime.length > 0 ? [[...chosen, ...regime]] : []),
      ]),
    )
    .digest('hex');
};

export const chainOptions = ({ mesovortices, intensity, anchor, regime, wind }: RunOptions): ChainOptions => ({
  ...DEFAULT_OPTIONS,
  ...wind,
  mesovortices,
  intensity,
  anchor,
  regime: regime ?? DEFAULT_OPTIONS.regime,
});

/** Where the options of a run leave what the calibration was signed for, in words; empty when they don't. */
export const departures = (
  options: RunOptions,
  { settings, curveSetId }: Calibration,
  curveSet: CurveSet,
): string[] => {
  const words: string[] = [];
  if (options.intensity !== settings.intensity) {
    words.push(`intensity from ${options.intensity} instead of ${settings.intensity}`);
  }
  if (options.anchor !== settings.anchor) words.push(`anchor “${options.anchor}” instead of “${settings.anchor}”`);
  if (curveSetId !== curveSet.id)
    words.push(`curve set ${curveSet.name} version ${curveSet.version}, not the one it is paired with`);
  const regime = regimeInWords(options.regime);
  return [...words, ...(regime === null ? [] : [regime]), ...chosenInWords(options.wind)];
};

/** The remarks every track of a run carries because of its set-up. */
export const setUpRemarks = (
  options: RunOptions,
  calibration: Calibration,
  curveSet: CurveSet,
  fixes: readonly TrackFix[],
): { code: string; text: string }[] => {
  const remarks: { code: string; text: string }[] = [];
  const name = `${calibration.code} version ${calibration.version}`;
  if (
    fixes.some(({ ringWidthFraction, eyeVorticityRatio }) => ringWidthFraction === null || eyeVorticityRatio === null)
  ) {
    const { ringWidthFraction, eyeVorticityRatio } = calibration.settings;
    remarks.push({
      code: 'ring-from-calibration',
      text: `Where the track gives no ring: width ${ringWidthFraction} and eye ratio ${eyeVorticityRatio} from calibration ${name}.`,
    });
  }
  const words = departures(options, calibration, curveSet);
  if (words.length > 0) {
    remarks.push({ code: 'options-differ', text: `Not as signed in calibration ${name}: ${words.join('; ')}.` });
  }
  if (options.mesovortices && curveSet.curve.fittedOn === 'plain') {
    remarks.push({
      code: 'curve-fitted-on-plain',
      text: `The damage curve ${curveSet.curve.code} was fitted on gusts without vortices. Enhanced losses may count the same gustiness twice; read them as an upper reading beside plain.`,
    });
  }
  return remarks;
};
