import type { CurveSet } from '#contract/models.ts';
import type { Actor } from '../../actor.ts';
import type { Transact } from '../../transact.ts';
import type { CurveStore } from './curve-store.ts';

/** Which damage curves an organisation may choose from. */
export class CurveService {
  constructor(
    private readonly transact: Transact,
    private readonly curves: CurveStore,
  ) {}

  async list(actor: Actor): Promise<{ items: CurveSet[] }> {
    return { items: await this.transact(actor, (tx) => this.curves.list(tx, actor.orgId)) };
  }
}
