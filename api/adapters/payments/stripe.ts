import { createHash } from 'node:crypto';
import Stripe from 'stripe';
import type { Checkout, CheckoutRequest, PaymentEvent, Payments, PaymentState } from '../../ports/payments.ts';

export type StripeSettings = {
  secretKey: string;
  webhookSecret: string;
  /** Base address of a local stand-in; null, the SDK talks to Stripe itself. */
  apiUrl: string | null;
};

const OPEN: PaymentState = { outcome: 'open', reason: null, amountMinor: null, currency: null };

const fromSession = (session: Stripe.Checkout.Session): PaymentState => {
  const amounts = { amountMinor: session.amount_total, currency: session.currency?.toUpperCase() ?? null };
  if (session.status === 'expired') return { ...amounts, outcome: 'abandoned', reason: 'The payment page expired.' };
  return { ...amounts, outcome: session.payment_status === 'paid' ? 'paid' : 'open', reason: null };
};

const fromIntent = (intent: Stripe.PaymentIntent): PaymentState => ({
  outcome: 'declined',
  reason: intent.last_payment_error?.message ?? 'The card was declined.',
  amountMinor: intent.amount,
  currency: intent.currency.toUpperCase(),
});

const stateOf = (event: Stripe.Event): PaymentState => {
  switch (event.type) {
    case 'checkout.session.completed':
    case 'checkout.session.async_payment_succeeded':
    case 'checkout.session.expired':
      return fromSession(event.data.object);
    case 'checkout.session.async_payment_failed':
      return { ...fromSession(event.data.object), outcome: 'declined', reason: 'The payment didn’t clear.' };
    case 'payment_intent.payment_failed':
      return fromIntent(event.data.object);
    default:
      return OPEN;
  }
};

const metadataOf = (event: Stripe.Event): Stripe.Metadata =>
  'metadata' in event.data.object ? (event.data.object.metadata ?? {}) : {};

/** Prepaid top-ups through Stripe Checkout on its hosted page. */
export class StripePayments implements Payments {
  private readonly stripe: Stripe;

  constructor(private readonly settings: StripeSettings) {
    const at = settings.apiUrl ? new URL(settings.apiUrl) : null;
    this.stripe = new Stripe(settings.secretKey, {
      telemetry: false,
      timeout: 20_000,
      ...(at && {
        host: at.hostname,
        port: at.port,
        protocol: at.protocol === 'https:' ? ('https' as const) : ('http' as const),
      }),
    });
  }

  async openCheckout(request: CheckoutRequest): Promise<Checkout> {
    const metadata = { org_id: request.orgId, top_up_id: request.topUpId };
    const session = await this.stripe.checkout.sessions.create(
      {
        mode: 'payment',
        ui_mode: 'hosted_page',
        client_reference_id: request.topUpId,
        customer_email: request.email,
        line_items: [
          {
            quantity: 1,
            price_data: {
              currency: request.currency.toLowerCase(),
              unit_amount: request.amountMinor,
              product_data: { name: request.description },
            },
          },
        ],
        metadata,
        // A declined attempt is announced by its payment intent, so that must say whose it is as well.
        payment_intent_data: { metadata },
        success_url: request.successUrl,
        cancel_url: request.cancelUrl,
      },
      { idempotencyKey: `top-up-${request.topUpId}` },
    );
    if (!session.url) throw new Error(`checkout session ${session.id} came without a page`);
    return { sessionId: session.id, url: session.url };
  }

  async findPayment(sessionId: string): Promise<PaymentState> {
    return fromSession(await this.stripe.checkout.sessions.retrieve(sessionId));
  }

  readEvent(rawBody: Buffer, signature: string): PaymentEvent | null {
    let event: Stripe.Event;
    try {
      event = this.stripe.webhooks.constructEvent(rawBody, signature, this.settings.webhookSecret);
    } catch (error) {
      if (error instanceof Stripe.errors.StripeSignatureVerificationError || error instanceof SyntaxError) return null;
      throw error;
    }
    const metadata = metadataOf(event);
    // A test-mode message must not credit a live balance, nor the reverse.
    const sameMode = event.livemode === this.settings.secretKey.startsWith('sk_live_');
    return {
      ...(sameMode ? stateOf(event) : OPEN),
      id: event.id,
      type: event.type,
      topUpId: metadata.top_up_id ?? null,
      orgId: metadata.org_id ?? null,
      payloadDigest: createHash('sha256').update(rawBody).digest('hex'),
    };
  }
}
