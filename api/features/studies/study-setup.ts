import type { Notice } from '#contract/common.ts';
import { NOTICE_VERSION, noticesFor, RESULT_NOTICES } from '#contract/notices.ts';
import type { Calibration } from '#contract/models.ts';
import type { TrackFix } from '#engine/track/fixes.ts';
import { fixesWithRing } from '../../compute/ring-defaults.ts';
import { notFound } from '../../errors.ts';
import type { Tx } from '../../transact.ts';
import type { StudyModels, StudyTrack, StudyTracks } from './study-ports.ts';

/** A track ready to be studied, and what has to be said about it. */
export interface StudySetup {
  track: StudyTrack;
  /** With the ring of the signed calibration where the track gives none, as a run has it. */
  fixes: TrackFix[];
  /** The newest signed one, as runs take it unless told otherwise; null when none is signed. */
  calibration: Calibration | null;
  notices: Notice[];
}

const notice = (code: string, text: string): Notice => ({ code, text, version: NOTICE_VERSION });

/** Reads a scenario's version and the calibration in force. */
export async function studySetup(
  tx: Tx,
  orgId: string,
  scenarioId: string,
  version: number | undefined,
  { tracks, models }: { tracks: StudyTracks; models: StudyModels },
): Promise<StudySetup> {
  const track = await tracks.version(tx, orgId, scenarioId, version);
  if (!track) {
    throw version === undefined
      ? notFound('Scenario', scenarioId)
      : notFound('Version', `${version} of scenario ${scenarioId}`);
  }
  const calibration = (await models.calibrations(tx, orgId)).find(({ state }) => state === 'signed') ?? null;
  const leavesRing = track.fixes.some(
    ({ ringWidthFraction, eyeVorticityRatio }) => ringWidthFraction === null || eyeVorticityRatio === null,
  );
  return {
    track,
    fixes: calibration ? fixesWithRing(track.fixes, calibration.settings) : track.fixes,
    calibration,
    notices: [
      notice('exploratory', 'Exploratory: a study of settings, stored nowhere. A file rests on a run.'),
      ...(leavesRing ? [notice('ring-from-calibration', ringWords(calibration))] : []),
      ...(track.asOf === null ? [] : provisional(track.name, track.asOf)),
      ...conditioned(track),
      ...RESULT_NOTICES,
    ],
  };
}

const ringWords = (calibration: Calibration | null): string => {
  if (calibration === null) {
    return 'Where the track gives no ring: the usual width and eye ratio, since no calibration is signed.';
  }
  const { ringWidthFraction, eyeVorticityRatio } = calibration.settings;
  return `Where the track gives no ring: width ${ringWidthFraction} and eye ratio ${eyeVorticityRatio} from calibration ${calibration.code} version ${calibration.version}, as in a run.`;
};

const conditioned = ({ observations }: StudyTrack): Notice[] => {
  if (observations.length === 0) return [];
  const times = observations.map(({ timeLabel }) => timeLabel).join(', ');
  const text = `Conditioned on vortices observed at ${times}, where the vortex layer is on.`;
  return [notice('conditioned-on-observation', text)];
};

const provisional = (name: string, asOf: string): Notice[] => [
  notice('provisional', `${name}: track as of ${asOf}; the next advisory supersedes it.`),
  ...noticesFor('provisional'),
];
