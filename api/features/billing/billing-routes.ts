import { Router } from 'express';
import { createTopUp, getBalance, getTopUp, listCharges, listMovements } from '#contract/billing.ts';
import { handle } from '../../http/handle.ts';
import type { BillingService } from './billing-service.ts';

/** Balance, movements, charges and top-ups. */
export const billingRoutes = (billing: BillingService): Router => {
  const router = Router();
  router.get(
    getBalance.path,
    handle(getBalance, ({ actor }) => billing.balance(actor)),
  );
  router.get(
    listMovements.path,
    handle(listMovements, ({ actor, query }) => billing.movements(actor, query)),
  );
  router.get(
    listCharges.path,
    handle(listCharges, ({ actor, query }) => billing.charges(actor, query)),
  );
  router.post(
    createTopUp.path,
    handle(createTopUp, ({ actor, body }) => billing.createTopUp(actor, body.amountMinor)),
  );
  router.get(
    getTopUp.path,
    handle(getTopUp, ({ actor, params }) => billing.topUp(actor, params.topUpId)),
  );
  return router;
};
