import { z } from 'zod';
import { Currency, Id, Instant, Minor, PageQuery, pageOf } from './common.ts';
import { endpoint } from './endpoint.ts';
import { ADMINS, MONEY_READERS } from './roles.ts';

/** balance − reserved = free. */
export const Balance = z.object({
  balanceMinor: Minor,
  reservedMinor: Minor,
  freeMinor: Minor,
  currency: Currency,
  month: z.object({ label: z.string(), chargedMinor: Minor, runs: z.int() }),
});
export type Balance = z.infer<typeof Balance>;

/** Movements of the prepaid balance as a person reads them; double entry stands behind each. */
export const Movement = z.object({
  id: Id,
  at: Instant,
  kind: z.enum(['opening', 'top_up', 'reserve', 'release', 'charge', 'refund']),
  text: z.string(),
  runNumber: z.string().nullable(),
  runId: Id.nullable(),
  by: z.string().nullable(),
  /** Signed effect on the free balance. */
  amountMinor: Minor,
  currency: Currency,
});
export type Movement = z.infer<typeof Movement>;
export const Charge = z.object({
  runId: Id,
  runNumber: z.string(),
  portfolioName: z.string(),
  acceptedAt: Instant,
  acceptedBy: z.string(),
  costCentre: z.string(),
  quotedMinor: Minor,
  chargedMinor: Minor.nullable(),
  releasedMinor: Minor.nullable(),
  currency: Currency,
  state: z.enum(['reserved', 'charged', 'released']),
});
export type Charge = z.infer<typeof Charge>;

export const TopUpRequest = z.object({
  amountMinor: Minor.min(1000, 'The smallest top-up is 10.00.').max(10_000_000, 'The largest top-up is 100,000.00.'),
});
export const TopUp = z.object({
  id: Id,
  amountMinor: Minor,
  currency: Currency,
  state: z.enum(['pending', 'succeeded', 'declined', 'abandoned']),
  /** Why it failed, in the provider's words. */
  reason: z.string().nullable(),
  /** The provider's page; card details are entered only there. */
  checkoutUrl: z.url().nullable(),
  createdAt: Instant,
});
export type TopUp = z.infer<typeof TopUp>;

export const getBalance = endpoint({
  id: 'getBalance',
  method: 'get',
  path: '/billing/balance',
  summary: 'Balance, reserved and free',
  access: MONEY_READERS,
  response: Balance,
  status: 200,
});
export const listMovements = endpoint({
  id: 'listMovements',
  method: 'get',
  path: '/billing/movements',
  summary: 'Movements of the prepaid balance, newest first',
  access: ['admin', 'auditor'],
  query: PageQuery,
  response: pageOf(Movement),
  status: 200,
});
export const listCharges = endpoint({
  id: 'listCharges',
  method: 'get',
  path: '/billing/charges',
  summary: 'What each run was quoted, charged and released; people who aren’t admins see their own',
  access: MONEY_READERS,
  query: PageQuery,
  response: pageOf(Charge),
  status: 200,
});
export const createTopUp = endpoint({
  id: 'createTopUp',
  method: 'post',
  path: '/billing/top-ups',
  summary: 'Start a top-up; the person pays on the provider’s page and the signed webhook credits it',
  access: ADMINS,
  idempotent: true,
  body: TopUpRequest,
  response: TopUp,
  status: 201,
});
export const getTopUp = endpoint({
  id: 'getTopUp',
  method: 'get',
  path: '/billing/top-ups/:topUpId',
  summary: 'State of a top-up',
  access: ADMINS,
  params: z.object({ topUpId: Id }),
  response: TopUp,
  status: 200,
});
