import { createHash } from 'node:crypto';
import type { Calibration, CalibrationDraft, CalibrationSettings } from '#contract/models.ts';
import type { Actor } from '../../actor.ts';
import { notFound } from '../../errors.ts';
import type { Clock } from '../../ports/clock.ts';
import type { Ids } from '../../ports/ids.ts';
import type { Transact, Tx } from '../../transact.ts';
import type { CalibrationStore } from './calibration-store.ts';

interface Audit {
  record(tx: Tx, actor: Actor, action: string, object: string, details: object): Promise<void>;
}

/** Settings in a fixed order of fields: the database keeps its own. */
const inOrder = ({
  intensity,
  anchor,
  ringWidthFraction,
  eyeVorticityRatio,
}: CalibrationSettings): CalibrationSettings => ({ intensity, anchor, ringWidthFraction, eyeVorticityRatio });

/** Which calibrations an organisation may choose from, and who signed them. */
export class CalibrationService {
  constructor(
    private readonly transact: Transact,
    private readonly calibrations: CalibrationStore,
    private readonly context: { clock: Clock; ids: Ids; audit: Audit },
  ) {}

  async list(actor: Actor): Promise<{ items: Calibration[] }> {
    return { items: await this.transact(actor, (tx) => this.calibrations.list(tx, actor.orgId)) };
  }

  /** The next version of a calibration’s code with another ring, unsigned; what it is based on stays as it is. */
  draft(actor: Actor, { basedOnId, note, ...ring }: CalibrationDraft): Promise<Calibration> {
    const { clock, ids, audit } = this.context;
    return this.transact(actor, async (tx) => {
      const base = await this.calibrations.find(tx, actor.orgId, basedOnId);
      if (!base) throw notFound('Calibration', basedOnId);
      const settings = inOrder({ ...base.settings, ...ring });
      const curveDigest = await this.calibrations.curveDigest(tx, actor.orgId, base.curveSetId);
      const draft: Calibration = {
        id: ids.next(),
        code: base.code,
        version: (await this.calibrations.lastVersion(tx, actor.orgId, base.code)) + 1,
        state: 'draft',
        note,
        settings,
        curveSetId: base.curveSetId,
        signedBy: null,
        signedAt: null,
        digest: createHash('sha256')
          .update(JSON.stringify([settings, curveDigest]))
          .digest('hex'),
      };
      await this.calibrations.insert(tx, actor.orgId, draft, { authorId: actor.userId, at: clock.now() });
      await audit.record(tx, actor, 'calibration.drafted', `calibration ${draft.id}`, {
        code: draft.code,
        version: draft.version,
        basedOn: base.version,
        ...ring,
        digest: draft.digest,
      });
      return draft;
    });
  }
}
