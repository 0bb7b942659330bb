import type { Calibration } from '#contract/models.ts';
import type { Actor } from '../../actor.ts';
import type { Transact } from '../../transact.ts';
import type { CalibrationStore } from './calibration-store.ts';

/** Which calibrations an organisation may choose from, and who signed them. */
export class CalibrationService {
  constructor(
    private readonly transact: Transact,
    private readonly calibrations: CalibrationStore,
  ) {}

  async list(actor: Actor): Promise<{ items: Calibration[] }> {
    return { items: await this.transact(actor, (tx) => this.calibrations.list(tx, actor.orgId)) };
  }
}
