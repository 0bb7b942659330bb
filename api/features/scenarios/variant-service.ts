import type { Notice } from '#contract/common.ts';
import type { Derivation, EnsembleRequest } from '#contract/derivations.ts';
import type { Fault } from '#contract/errors.ts';
import { noticesFor, NOTICE_VERSION } from '#contract/notices.ts';
import type { TrackResolution } from '#contract/scenarios.ts';
import { changeWords, derivationWords, variantWords } from '#contract/variant-words.ts';
import type { Variant, VariantsReply, VariantsRequest } from '#contract/variants.ts';
import type { LandIndex } from '#engine/geo/land.ts';
import { ensembleChanges, NO_CHANGE, sharpestTurn } from '#engine/track/variants.ts';
import type { Actor } from '../../actor.ts';
import { AppError, notFound } from '../../errors.ts';
import type { Transact, Tx } from '../../transact.ts';
import { changedFixes } from './changed-fixes.ts';
import { landfallOf } from './landfall.ts';
import { plain } from './reading/track-wording.ts';
import { resolveTrack, type Resolved } from './resolve-track.ts';
import type { ScenarioService } from './scenario-service.ts';
import type { ScenarioStore, StoredVersion } from './scenario-store.ts';
import { isSavable } from './track-rules.ts';
import { variantName } from './variant-names.ts';

/** A changed copy of a track, with what it was made from. */
type Made = { name: string; derivation: Derivation; resolved: Resolved };

/** Beyond this turn at a fix, legs run more than 1 km in 40 nearer than the offset: cos(half of it) is 0.975. */
const SHARP_TURN_DEG = 25.8;

const notice = (code: string, text: string): Notice => ({ code, text, version: NOTICE_VERSION });
const CHOSEN_SPREAD = notice(
  'chosen-spread',
  'A chosen spread, not a forecast cone: no variant is likelier than another.',
);
const BY_TIME = notice(
  'intensity-by-time',
  'Winds and pressures stay with their fix. A variant that comes ashore elsewhere, earlier or later doesn’t weaken for it; edit its fixes where that matters.',
);

/** Makes changed copies of a track, one by one or as an ensemble from a seed; each saved one is a scenario of its own. */
export class VariantService {
  constructor(
    private readonly transact: Transact,
    private readonly store: ScenarioStore,
    private readonly scenarios: Pick<ScenarioService, 'add'>,
    private readonly land: () => LandIndex,
  ) {}

  preview(actor: Actor, scenarioId: string, request: VariantsRequest): Promise<VariantsReply> {
    return this.transact(actor, async (tx) => {
      const { base, made } = await this.make(tx, actor, scenarioId, request);
      return this.reply(base, made, () => null);
    });
  }

  /** All of them or none. */
  save(actor: Actor, scenarioId: string, request: VariantsRequest): Promise<VariantsReply> {
    return this.transact(actor, async (tx) => {
      const { base, made } = await this.make(tx, actor, scenarioId, request);
      const ids = new Map<Made, string>();
      for (const one of made) {
        const { name, derivation, resolved } = one;
        const description = derivationWords(derivation, 1).slice(0, 500);
        ids.set(one, (await this.scenarios.add(tx, actor, { name, description, derivation }, resolved)).scenarioId);
      }
      return this.reply(base, made, (one) => ids.get(one)!);
    });
  }

  private async make(
    tx: Tx,
    actor: Actor,
    scenarioId: string,
    request: VariantsRequest,
  ): Promise<{ base: StoredVersion; made: Made[] }> {
    const base = await this.store.version(tx, actor.orgId, scenarioId, request.version);
    if (!base) throw notFound('Scenario', scenarioId);
    const taken = new Set(await this.store.namesLike(tx, actor.orgId, base.name.slice(0, 40)));
    const faults: Fault[] = [];
    const made = derivationsOf(base, request).map((derivation, i): Made => {
      const name = variantName(base.name, variantWords(derivation), taken);
      taken.add(name);
      const changed = changedFixes(base.track, base.resolution, derivation.change);
      const resolved = resolveTrack(changed, 'pressure', false, this.land());
      for (const finding of resolved.resolution.findings) {
        if (isSavable([finding])) continue;
        const path = derivation.ensemble === null ? `body.changes.${i}` : 'body.ensemble';
        faults.push({ code: finding.code, path, message: `${name}: ${finding.text}` });
      }
      return { name, derivation, resolved };
    });
    if (faults.length === 0) return { base, made };
    throw new AppError(
      'invalid_request',
      faults.length === 1
        ? `The change leads to a track that can’t be used. ${faults[0]!.message}`
        : `${faults.length} things keep these variants from being used. Change less, or spread less.`,
      { faults },
    );
  }

  private reply(base: StoredVersion, made: readonly Made[], idOf: (one: Made) => string | null): VariantsReply {
    const start = base.resolution.path[0]![0];
    const variants = made.map((one) => ({
      ...this.shown(one.resolved.resolution, start),
      name: one.name,
      change: one.derivation.change,
      scenarioId: idOf(one),
    }));
    return {
      base: {
        ...this.shown(base.resolution, start),
        name: base.name,
        change: NO_CHANGE,
        scenarioId: base.scenarioId,
      },
      variants,
      notices: noticesOf(base, made),
    };
  }

  /** In longitudes of the turn in which the base track starts, so that all lines lie side by side. */
  private shown(resolution: TrackResolution, start: number): Pick<Variant, 'path' | 'maxWindMs' | 'landfall'> {
    const turn = 360 * Math.round((start - resolution.path[0]![0]) / 360);
    const landfall = landfallOf(resolution, this.land());
    return {
      path: resolution.path.map(([longitude, latitude]): [number, number] => [longitude + turn, latitude]),
      maxWindMs: resolution.fixes[resolution.maxima.fix]!.maxWindMs,
      landfall: landfall && { ...landfall, longitude: landfall.longitude + turn },
    };
  }
}

/** Which changes are asked for, and from what. */
const derivationsOf = (
  { scenarioId, name, number: version }: StoredVersion,
  { changes, ensemble }: VariantsRequest,
): Derivation[] => {
  const from = { scenarioId, name, version };
  if (ensemble) {
    const { seed, members } = ensemble;
    const spread = requireSpread(ensemble);
    return ensembleChanges(seed, members, spread).map((change, i) => ({
      ...from,
      change,
      ensemble: { seed, members, member: i + 1, spread: ensemble },
    }));
  }
  const faults = changes!.flatMap((change, i) =>
    changeWords(change) === ''
      ? [{ path: `body.changes.${i}`, message: 'Change something: this would be the same track again.' }]
      : [],
  );
  if (faults.length > 0) throw new AppError('invalid_request', faults[0]!.message, { faults });
  return changes!.map((change) => ({ ...from, change, ensemble: null }));
};

const requireSpread = ({ offsetKm, headingDeg, windLog, speedLog, radiusLog }: EnsembleRequest) => {
  const spread = { offsetKm, headingDeg, windLog, speedLog, radiusLog };
  if (Object.values(spread).some((deviation) => deviation > 0)) return spread;
  const message = 'Give at least one spread above 0: without one, every member is the same track again.';
  throw new AppError('invalid_request', message, { faults: [{ path: 'body.ensemble', message }] });
};

const noticesOf = ({ track }: StoredVersion, made: readonly Made[]): Notice[] => {
  const some = (test: (change: Derivation['change']) => boolean) =>
    made.some(({ derivation }) => test(derivation.change));
  const { fix, turnDeg } = sharpestTurn(track.fixes);
  const away = plain(Math.cos((turnDeg * Math.PI) / 360), 2);
  return [
    CHOSEN_SPREAD,
    ...(some(({ offsetKm, headingDeg, speedFactor }) => offsetKm !== 0 || headingDeg !== 0 || speedFactor !== 1)
      ? [BY_TIME]
      : []),
    ...(turnDeg > SHARP_TURN_DEG && some(({ offsetKm }) => offsetKm !== 0)
      ? [
          notice(
            'sharp-turn',
            `The track turns by ${plain(turnDeg, 0)}° at fix ${fix + 1}. Every fix is moved by exactly the offset; the legs beside that turn run ${away} times the offset away.`,
          ),
        ]
      : []),
    ...(some(({ radiusFactor }) => radiusFactor !== 1) && track.fixes.some((one) => one.radiusOfMaxWindM === null)
      ? [
          notice(
            'radius-filled',
            'Where the track gives neither a radius of maximum wind nor 64-kt radii, the radius filled by relation is what is made larger or smaller, and is kept.',
          ),
        ]
      : []),
    ...(track.vortices?.length
      ? [
          notice(
            'observations-left-out',
            'Variants don’t keep the observed vortices: those belong to the track as it was. Their phases are drawn at random.',
          ),
        ]
      : []),
    ...(track.declarations.asOf === null ? [] : noticesFor('provisional')),
    ...noticesFor('life-safety', 'uncertainty', 'scope'),
  ];
};
