import { z } from 'zod';
import type { Clock } from '../ports/clock.ts';
import type { Ids } from '../ports/ids.ts';
import type { Mail } from '../ports/mail.ts';
import type { Transact, Tx } from '../transact.ts';
import type { Job, Jobs, Queue } from './queue.ts';

const DELIVER = 'outbox.deliver';
const Delivery = z.object({ orgId: z.uuid(), outboxId: z.uuid() });
const Letter = z.object({ to: z.string(), subject: z.string(), text: z.string() });
export type Letter = z.infer<typeof Letter>;

/** Mail is written beside the fact it announces, in one transaction, and delivered afterwards as often as it takes. */
export class Outbox {
  constructor(
    private readonly jobs: Jobs,
    private readonly clock: Clock,
    private readonly ids: Ids,
  ) {}

  async post(tx: Tx, orgId: string, letter: Letter): Promise<void> {
    const outboxId = this.ids.next();
    await tx('outbox').insert({
      id: outboxId,
      org_id: orgId,
      kind: 'mail',
      payload: JSON.stringify(letter),
      created_at: this.clock.now(),
    });
    await this.jobs.enqueue(tx, DELIVER, { orgId, outboxId });
  }
}

interface OutboxRow {
  id: string;
  payload: unknown;
  delivered_at: Date | null;
}

/** Delivers one letter; repeated calls deliver it once, unless the process dies between sending and noting it. */
export const deliverLetter =
  (transact: Transact, mail: Mail, clock: Clock) =>
  async ({ data }: Pick<Job, 'data'>): Promise<void> => {
    const { orgId, outboxId } = Delivery.parse(data);
    const failure = await transact(orgId, async (tx): Promise<unknown> => {
      const row = await tx('outbox')
        .where({ org_id: orgId, id: outboxId })
        .forUpdate()
        .first<OutboxRow | undefined>('id', 'payload', 'delivered_at');
      if (!row || row.delivered_at) return null;
      const note = (change: object) =>
        tx('outbox')
          .where({ org_id: orgId, id: outboxId })
          .update({ ...change, attempts: tx.raw('attempts + 1') });
      try {
        await mail.send({ id: outboxId, ...Letter.parse(row.payload) });
        await note({ delivered_at: clock.now(), last_error: null });
        return null;
      } catch (error) {
        await note({ last_error: error instanceof Error ? error.message : String(error) });
        return error;
      }
    });
    if (failure !== null) throw failure;
  };

export const registerOutboxJobs = (
  queue: Queue,
  deps: { transact: Transact; mail: Mail; clock: Clock },
): Promise<void> => queue.work(DELIVER, deliverLetter(deps.transact, deps.mail, deps.clock));
