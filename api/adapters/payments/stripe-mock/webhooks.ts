import { createHmac, randomBytes } from 'node:crypto';
import type { PaymentIntent, Session } from './sessions.ts';

export type EventType =
  | 'checkout.session.completed'
  | 'checkout.session.async_payment_succeeded'
  | 'checkout.session.expired'
  | 'payment_intent.payment_failed'
  | 'payment_intent.requires_action'
  | 'payment_intent.succeeded';

export type MockEvent = {
  id: string;
  object: 'event';
  api_version: string;
  created: number;
  livemode: false;
  pending_webhooks: 1;
  request: { id: null; idempotency_key: null };
  type: EventType;
  data: { object: Session | PaymentIntent };
};

/**
 * How messages of a payment travel, chosen by the cents of its amount so that a person can show each in the running
 * product: .11 every message twice, .12 in reverse order, .13 five seconds late, .14 first with a wrong signature.
 */
export type DeliveryMode = 'plain' | 'twice' | 'reversed' | 'late' | 'forged-first';
const MODES: Record<number, DeliveryMode> = { 11: 'twice', 12: 'reversed', 13: 'late', 14: 'forged-first' };
export const deliveryMode = (amountMinor: number): DeliveryMode => MODES[amountMinor % 100] ?? 'plain';

/** The `Stripe-Signature` header: HMAC-SHA256 over time and payload, as Stripe's webhook guide describes. */
export const signatureHeader = (payload: string, secret: string, timeS: number): string =>
  `t=${timeS},v1=${createHmac('sha256', secret).update(`${timeS}.${payload}`).digest('hex')}`;

/** Sends signed events to one address, trying again as the provider would. */
export class WebhookSender {
  private readonly waiting = new Set<Promise<void>>();
  private readonly timers = new Map<NodeJS.Timeout, () => void>();
  private stopped = false;

  constructor(
    private readonly settings: {
      url: string;
      secret: string;
      nowS: () => number;
      lateMs: number;
      retryMs: readonly number[];
    },
  ) {}

  event(type: EventType, object: Session | PaymentIntent): MockEvent {
    return {
      id: `evt_test_${randomBytes(12).toString('hex')}`,
      object: 'event',
      api_version: '2026-10-28.endive',
      created: this.settings.nowS(),
      livemode: false,
      pending_webhooks: 1,
      request: { id: null, idempotency_key: null },
      type,
      // A copy: the message tells the state at its time, whatever happens later.
      data: { object: structuredClone(object) },
    };
  }

  /** Sends the events of one payment in its delivery mode; returns at once. */
  send(events: MockEvent[], mode: DeliveryMode): void {
    const work = this.deliver(events, mode).finally(() => this.waiting.delete(work));
    this.waiting.add(work);
  }

  /** Resolves when nothing is on its way. */
  async settled(): Promise<void> {
    while (this.waiting.size > 0) await Promise.all(this.waiting);
  }

  stop(): void {
    this.stopped = true;
    for (const [timer, wake] of this.timers) {
      clearTimeout(timer);
      wake();
    }
    this.timers.clear();
  }

  private async deliver(events: MockEvent[], mode: DeliveryMode): Promise<void> {
    if (mode === 'late') await this.pause(this.settings.lateMs);
    for (const event of mode === 'reversed' ? [...events].reverse() : events) {
      if (mode === 'forged-first') await this.post(event, 'whsec_forged');
      await this.untilTaken(event);
      if (mode === 'twice') await this.untilTaken(event);
    }
  }

  private async untilTaken(event: MockEvent): Promise<void> {
    for (const waitMs of [0, ...this.settings.retryMs]) {
      if (this.stopped) return;
      await this.pause(waitMs);
      if (await this.post(event, this.settings.secret)) return;
    }
  }

  private async post(event: MockEvent, secret: string): Promise<boolean> {
    const payload = JSON.stringify(event);
    try {
      const reply = await fetch(this.settings.url, {
        method: 'POST',
        headers: {
          'content-type': 'application/json; charset=utf-8',
          'stripe-signature': signatureHeader(payload, secret, this.settings.nowS()),
        },
        body: payload,
        signal: AbortSignal.timeout(10_000),
      });
      await reply.arrayBuffer();
      return reply.ok;
    } catch {
      // Nobody answered: the same as any refusal, it is tried again.
      return false;
    }
  }

  private pause(ms: number): Promise<void> {
    if (ms === 0 || this.stopped) return Promise.resolve();
    return new Promise((resolve) => {
      const timer = setTimeout(() => {
        this.timers.delete(timer);
        resolve();
      }, ms);
      this.timers.set(timer, resolve);
    });
  }
}
