import { createHash } from 'node:crypto';
import { setTimeout as sleep } from 'node:timers/promises';
import type { Request } from 'express';
import type { Actor } from '../actor.ts';
import { AppError } from '../errors.ts';
import type { Clock } from '../ports/clock.ts';
import type { Transact } from '../transact.ts';

interface Kept {
  status: number;
  reply: string;
}

/** Carries a request out once for its Idempotency-Key, and gives repeats the first reply. */
export type Once = (actor: Actor, req: Request, status: number, work: () => Promise<unknown>) => Promise<Kept>;

interface KeyRow {
  request_digest: string;
  status: number | null;
  reply: string | null;
}

const KEY_FORM = /^[\x21-\x7e]{8,200}$/;
const KEPT_MS = 48 * 3600 * 1000;
/** Longer than any such request runs: a claim this old was left by a process that died. */
const ABANDONED_MS = 30_000;
const POLL_MS = 100;

const digestOf = (req: Request) =>
  createHash('sha256')
    .update(JSON.stringify([req.method, req.originalUrl, req.body ?? null]))
    .digest('hex');

const keyOf = (req: Request): string => {
  const key = req.get('Idempotency-Key');
  if (key !== undefined && KEY_FORM.test(key)) return key;
  throw new AppError(
    'idempotency_key_missing',
    'This request does something once, so it needs an Idempotency-Key header: 8 to 200 characters, new for each intent.',
  );
};

export const createOnce =
  (transact: Transact, clock: Clock): Once =>
  async (actor, req, status, work) => {
    const key = keyOf(req);
    const digest = digestOf(req);
    const mine = { org_id: actor.orgId, user_id: actor.userId, key };

    /** True when this request may go ahead; a row says that another one did or does. */
    const claim = () =>
      transact(actor, async (tx): Promise<true | KeyRow> => {
        const now = clock.now();
        await tx('idempotency_keys')
          .where({ org_id: actor.orgId, user_id: actor.userId })
          .where('claimed_at', '<', new Date(now.getTime() - KEPT_MS))
          .delete();
        const inserted = await tx('idempotency_keys')
          .insert({ ...mine, request_digest: digest, claimed_at: now })
          .onConflict(['org_id', 'user_id', 'key'])
          .ignore()
          .returning('key');
        if (inserted.length > 0) return true;
        const takenOver = await tx('idempotency_keys')
          .where({ ...mine, request_digest: digest })
          .whereNull('status')
          .where('claimed_at', '<', new Date(now.getTime() - ABANDONED_MS))
          .update({ claimed_at: now })
          .returning('key');
        if (takenOver.length > 0) return true;
        const row = await tx('idempotency_keys')
          .where(mine)
          .first<KeyRow | undefined>('request_digest', 'status', 'reply');
        return row ?? { request_digest: digest, status: null, reply: null };
      });

    for (let waitedMs = 0; ; waitedMs += POLL_MS) {
      const claimed = await claim();
      if (claimed === true) break;
      if (claimed.request_digest !== digest) {
        throw new AppError(
          'idempotency_key_reused',
          'This Idempotency-Key was already used for a different request. Use a new key for a new intent.',
        );
      }
      if (claimed.status !== null) return { status: claimed.status, reply: claimed.reply ?? 'null' };
      if (waitedMs > ABANDONED_MS) {
        throw new AppError('conflict', 'The same request is still being carried out. Ask again in a moment.', {
          retryAfterS: 5,
        });
      }
      await sleep(POLL_MS);
    }

    try {
      const reply = JSON.stringify(await work());
      await transact(actor, (tx) => tx('idempotency_keys').where(mine).update({ status, reply }));
      return { status, reply };
    } catch (error) {
      // Nothing was done, so the same key may try again once the cause is put right.
      await transact(actor, (tx) => tx('idempotency_keys').where(mine).whereNull('status').delete());
      throw error;
    }
  };
