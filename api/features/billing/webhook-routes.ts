import express, { Router } from 'express';
import type { PaymentSettlement } from './payment-settlement.ts';

/** Where the payment provider posts its signed messages. Outside the contract: its form is the provider's. */
const WEBHOOK_PATH = '/webhooks/payments';

/** Mount before any JSON parser: the signature covers the bytes as they came. */
export const paymentWebhookRoutes = (settlement: PaymentSettlement): Router => {
  const router = Router();
  router.post(WEBHOOK_PATH, express.raw({ type: () => true, limit: '256kb' }), async (req, res) => {
    const body = Buffer.isBuffer(req.body) ? req.body : Buffer.alloc(0);
    const receipt = await settlement.receive(body, req.get('stripe-signature') ?? '');
    res.json({ received: true, receipt });
  });
  return router;
};
