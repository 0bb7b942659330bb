export type CheckoutRequest = {
  topUpId: string;
  orgId: string;
  amountMinor: number;
  currency: string;
  /** What the person reads on the provider's page. */
  description: string;
  email: string;
  /** Where the provider sends the browser afterwards. Coming back proves nothing. */
  successUrl: string;
  cancelUrl: string;
};

export type Checkout = { sessionId: string; url: string };

/** What the provider says about one payment; `open` covers waiting and slow payments. */
export type PaymentState = {
  outcome: 'open' | 'paid' | 'declined' | 'abandoned';
  /** Why it was declined, in the provider's words. */
  reason: string | null;
  amountMinor: number | null;
  currency: string | null;
};

/** A signed message of the provider. Ids are as the provider carries them back: not yet known to be ours. */
export type PaymentEvent = PaymentState & {
  id: string;
  type: string;
  topUpId: string | null;
  orgId: string | null;
  payloadDigest: string;
};

/** Card payments at an outside provider; card details never reach us. */
export interface Payments {
  /** Opens a page where the person pays. Calling again for the same top-up gives the same page. */
  openCheckout(request: CheckoutRequest): Promise<Checkout>;
  /** Asks the provider itself, for when its message got lost. */
  findPayment(sessionId: string): Promise<PaymentState>;
  /** Checks the signature over the raw bytes and reads the message; null when the signature doesn't hold. */
  readEvent(rawBody: Buffer, signature: string): PaymentEvent | null;
}
