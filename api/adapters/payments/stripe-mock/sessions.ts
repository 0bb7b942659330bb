import { randomBytes } from 'node:crypto';

export type Metadata = Record<string, string>;

export type IntentError = { type: 'card_error'; code: string; decline_code?: string; message: string };

export type PaymentIntent = {
  id: string;
  object: 'payment_intent';
  amount: number;
  currency: string;
  status: 'requires_payment_method' | 'requires_action' | 'processing' | 'succeeded' | 'canceled';
  metadata: Metadata;
  last_payment_error: IntentError | null;
  livemode: false;
  created: number;
};

export type Session = {
  id: string;
  object: 'checkout.session';
  mode: 'payment';
  ui_mode: 'hosted_page';
  status: 'open' | 'complete' | 'expired';
  payment_status: 'unpaid' | 'paid';
  amount_total: number;
  amount_subtotal: number;
  currency: string;
  client_reference_id: string | null;
  customer_email: string | null;
  metadata: Metadata;
  payment_intent: string;
  success_url: string;
  cancel_url: string | null;
  url: string | null;
  livemode: false;
  created: number;
  expires_at: number;
};

export type NewSession = {
  amount: number;
  currency: string;
  description: string;
  clientReferenceId: string | null;
  email: string | null;
  metadata: Metadata;
  intentMetadata: Metadata;
  successUrl: string;
  cancelUrl: string | null;
};

const newId = (prefix: string) => `${prefix}_test_${randomBytes(12).toString('hex')}`;
const DAY_S = 86_400;

/** Sessions and payment intents in memory: a stand-in forgets when it stops. */
export class SessionBook {
  private readonly sessions = new Map<string, Session>();
  private readonly intents = new Map<string, PaymentIntent>();
  private readonly descriptions = new Map<string, string>();

  constructor(
    private readonly pageUrl: string,
    private readonly nowS: () => number,
  ) {}

  open(request: NewSession): Session {
    const id = newId('cs');
    const created = this.nowS();
    const intent: PaymentIntent = {
      id: newId('pi'),
      object: 'payment_intent',
      amount: request.amount,
      currency: request.currency,
      status: 'requires_payment_method',
      metadata: request.intentMetadata,
      last_payment_error: null,
      livemode: false,
      created,
    };
    const session: Session = {
      id,
      object: 'checkout.session',
      mode: 'payment',
      ui_mode: 'hosted_page',
      status: 'open',
      payment_status: 'unpaid',
      amount_total: request.amount,
      amount_subtotal: request.amount,
      currency: request.currency,
      client_reference_id: request.clientReferenceId,
      customer_email: request.email,
      metadata: request.metadata,
      payment_intent: intent.id,
      success_url: request.successUrl,
      cancel_url: request.cancelUrl,
      url: `${this.pageUrl}/pay/${id}`,
      livemode: false,
      created,
      expires_at: created + DAY_S,
    };
    this.sessions.set(id, session);
    this.intents.set(intent.id, intent);
    this.descriptions.set(id, request.description);
    return session;
  }

  session(id: string): Session | undefined {
    return this.sessions.get(id);
  }

  intent(id: string): PaymentIntent | undefined {
    return this.intents.get(id);
  }

  description(sessionId: string): string {
    return this.descriptions.get(sessionId) ?? '';
  }
}
