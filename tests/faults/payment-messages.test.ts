import { randomUUID } from 'node:crypto';
import type { RequestListener } from 'node:http';
import request from 'supertest';
import { beforeEach, describe, expect, it } from 'vitest';
import { Balance, TopUp } from '#contract/billing.ts';
import { signatureHeader } from '../../api/adapters/payments/stripe-mock/webhooks.ts';
import { createTestApp, type Browser } from '../helpers/app.ts';
import { testProvider } from '../helpers/payment-provider.ts';
import { DUNE, REEF } from '../helpers/people.ts';

const provider = await testProvider();
const { app, database, clock, signIn } = await createTestApp({ config: provider.config });
const listener = app as RequestListener;
const admin = await signIn('admin');
const stranger = await signIn('admin', { org: REEF });

const CARD = {
  pays: '4242424242424242',
  declined: '4000000000000002',
  asks: '4000002500003155',
  slow: '4000000000000077',
};

beforeEach(() => {
  provider.deliverTo(listener);
});

const start = async (amountMinor: number, browser: Browser = admin) =>
  TopUp.parse((await browser.post('/billing/top-ups', { amountMinor }).expect(201)).body);
const look = async (id: string) => TopUp.parse((await admin.get(`/billing/top-ups/${id}`).expect(200)).body);
const free = async () => Balance.parse((await admin.get('/billing/balance').expect(200)).body).freeMinor;
const creditsOf = (id: string) =>
  database.superUser('ledger_entries').where({ top_up_id: id, account: 'free' }).select('amount_minor');
const settled = () => provider.mock.settled();

/** A message signed like the provider's, of our own making. */
const message = (over: {
  id?: string;
  topUpId: string;
  orgId: string;
  amount: number;
  type?: string;
  livemode?: boolean;
}) => ({
  id: over.id ?? `evt_${randomUUID()}`,
  object: 'event',
  livemode: over.livemode ?? false,
  type: over.type ?? 'checkout.session.completed',
  data: {
    object: {
      id: 'cs_test_made_here',
      object: 'checkout.session',
      status: 'complete',
      payment_status: 'paid',
      amount_total: over.amount,
      currency: 'usd',
      metadata: { org_id: over.orgId, top_up_id: over.topUpId },
    },
  },
});
const post = (event: object, header?: string) => {
  const payload = JSON.stringify(event);
  const signed = signatureHeader(payload, provider.config.STRIPE_WEBHOOK_SECRET, Math.floor(Date.now() / 1000));
  return request(app)
    .post('/api/v1/webhooks/payments')
    .set({ 'content-type': 'application/json', 'stripe-signature': header ?? signed })
    .send(payload);
};

describe('a payment on the provider’s page', () => {
  it('is credited by the signed message, not by the browser coming back', async () => {
    const before = await free();
    provider.loseMessages();
    const topUp = await start(10_000);
    expect(topUp).toMatchObject({ state: 'pending', amountMinor: 10_000, currency: 'USD' });
    const { status, backTo } = await provider.choose(topUp.checkoutUrl!, CARD.pays);
    expect([status, backTo]).toEqual([303, `http://localhost:3000/billing?topUp=${topUp.id}`]);
    expect(await look(topUp.id)).toMatchObject({ state: 'pending' });
    expect(await free()).toBe(before);
    provider.deliverTo(listener);
    await settled();
    expect(await look(topUp.id)).toMatchObject({ state: 'succeeded', checkoutUrl: null });
    expect(await free()).toBe(before + 10_000);
  });

  it('says why a card was declined, and can be paid with another', async () => {
    const topUp = await start(5_000);
    expect((await provider.choose(topUp.checkoutUrl!, CARD.declined)).status).toBe(402);
    await settled();
    expect(await look(topUp.id)).toMatchObject({ state: 'declined', reason: 'Your card was declined.' });
    expect(await creditsOf(topUp.id)).toEqual([]);
    await provider.choose(topUp.checkoutUrl!, CARD.pays);
    await settled();
    expect(await look(topUp.id)).toMatchObject({ state: 'succeeded', reason: null });
    expect(await creditsOf(topUp.id)).toHaveLength(1);
  });

  it('waits for the bank’s question', async () => {
    const topUp = await start(5_000);
    await provider.choose(topUp.checkoutUrl!, CARD.asks);
    await settled();
    expect(await look(topUp.id)).toMatchObject({ state: 'pending' });
    await provider.confirm(topUp.checkoutUrl!, 'no');
    await settled();
    expect(await look(topUp.id)).toMatchObject({ state: 'declined' });
    await provider.choose(topUp.checkoutUrl!, CARD.asks);
    await provider.confirm(topUp.checkoutUrl!, 'yes');
    await settled();
    expect(await look(topUp.id)).toMatchObject({ state: 'succeeded' });
  });

  it('stays pending while it is slow, then is credited', async () => {
    const topUp = await start(5_000);
    await provider.choose(topUp.checkoutUrl!, CARD.slow);
    expect(await look(topUp.id)).toMatchObject({ state: 'pending' });
    await settled();
    expect(await look(topUp.id)).toMatchObject({ state: 'succeeded' });
  });
});

describe('messages that come wrong', () => {
  it.each([
    ['twice', 5_011, CARD.pays],
    ['in reverse order', 5_012, CARD.slow],
    ['late', 5_013, CARD.pays],
    ['with a wrong signature first', 5_014, CARD.pays],
  ])('%s: credited once', async (_how, amount, card) => {
    const before = await free();
    const topUp = await start(amount);
    await provider.choose(topUp.checkoutUrl!, card);
    await settled();
    expect(await look(topUp.id)).toMatchObject({ state: 'succeeded' });
    expect(await creditsOf(topUp.id)).toHaveLength(1);
    expect(await free()).toBe(before + amount);
  });

  it('credits once when the same message, and others about the same payment, arrive together', async () => {
    const topUp = await start(7_000);
    const about = { topUpId: topUp.id, orgId: DUNE.id, amount: 7_000 };
    const same = message(about);
    const replies = await Promise.all([
      ...[1, 2, 3, 4].map(() => post(same)),
      post(message(about)),
      post(message({ ...about, type: 'checkout.session.async_payment_succeeded' })),
    ]);
    expect(replies.map(({ status }) => status)).toEqual(replies.map(() => 200));
    expect(replies.filter(({ body }) => (body as { receipt: string }).receipt === 'credited')).toHaveLength(1);
    expect(await creditsOf(topUp.id)).toHaveLength(1);
  });

  it('keeps a payment that succeeded when a failure is reported afterwards', async () => {
    const topUp = await start(4_000);
    await post(message({ topUpId: topUp.id, orgId: DUNE.id, amount: 4_000 })).expect(200);
    await post(
      message({ topUpId: topUp.id, orgId: DUNE.id, amount: 4_000, type: 'checkout.session.async_payment_failed' }),
    ).expect(200);
    expect(await look(topUp.id)).toMatchObject({ state: 'succeeded' });
  });

  it('refuses a bad signature, one over other bytes and an old one, and writes nothing', async () => {
    const topUp = await start(4_000);
    const event = message({ topUpId: topUp.id, orgId: DUNE.id, amount: 4_000 });
    const secret = provider.config.STRIPE_WEBHOOK_SECRET;
    const now = Math.floor(Date.now() / 1000);
    const headers = [
      't=1,v1=00',
      '',
      signatureHeader(JSON.stringify(event), 'whsec_of_somebody_else', now),
      signatureHeader(JSON.stringify({ ...event, livemode: true }), secret, now),
      signatureHeader(JSON.stringify(event), secret, now - 3_600),
    ];
    for (const header of headers) {
      const reply = await post(event, header);
      expect([reply.status, (reply.body as { code: string }).code]).toEqual([400, 'webhook_signature']);
    }
    expect(await look(topUp.id)).toMatchObject({ state: 'pending' });
    expect(await database.superUser('provider_events').where({ id: event.id })).toEqual([]);
  });

  it.each([
    ['an unknown organisation', randomUUID(), null],
    ['something that is no organisation', "'; drop table payments; --", null],
    ['a top-up of another organisation', REEF.id, null],
    ['an unknown top-up', DUNE.id, randomUUID()],
  ])('takes a message about %s without effect', async (_whose, orgId, topUpId) => {
    const topUp = await start(4_000);
    const reply = await post(message({ topUpId: topUpId ?? topUp.id, orgId, amount: 4_000 })).expect(200);
    expect(reply.body).toEqual({ received: true, receipt: 'unknown' });
    expect(await look(topUp.id)).toMatchObject({ state: 'pending' });
  });

  it('doesn’t credit another amount than was asked', async () => {
    const topUp = await start(4_000);
    await post(message({ topUpId: topUp.id, orgId: DUNE.id, amount: 400_000 })).expect(200);
    expect(await look(topUp.id)).toMatchObject({ state: 'declined' });
    expect(await creditsOf(topUp.id)).toEqual([]);
  });

  it('doesn’t let a live-mode message credit a test-mode balance', async () => {
    const topUp = await start(4_000);
    await post(message({ topUpId: topUp.id, orgId: DUNE.id, amount: 4_000, livemode: true })).expect(200);
    expect(await look(topUp.id)).toMatchObject({ state: 'pending' });
  });
});

it('asks the provider itself when its message got lost', async () => {
  provider.loseMessages();
  const topUp = await start(6_000);
  await provider.choose(topUp.checkoutUrl!, CARD.pays);
  await settled();
  expect(await look(topUp.id)).toMatchObject({ state: 'pending' });
  clock.pass(16_000);
  expect(await look(topUp.id)).toMatchObject({ state: 'succeeded' });
  expect(await creditsOf(topUp.id)).toHaveLength(1);
});

it('shows a top-up to nobody of another organisation', async () => {
  const topUp = await start(4_000);
  await stranger.get(`/billing/top-ups/${topUp.id}`).expect(404);
});

it('records who started a top-up and that it was credited', async () => {
  const topUp = await start(4_000);
  await post(message({ topUpId: topUp.id, orgId: DUNE.id, amount: 4_000 })).expect(200);
  const entries = await database
    .superUser('audit_entries')
    .where({ object: `top-up ${topUp.id}` })
    .orderBy('at');
  expect(entries.map(({ action }) => action as string).sort()).toEqual(['top_up.credited', 'top_up.started']);
});

it('charges nothing and says so when the provider is down', async () => {
  await provider.goDown();
  const reply = await admin.post('/billing/top-ups', { amountMinor: 4_000 });
  expect([reply.status, (reply.body as { code: string }).code]).toEqual([503, 'payment_unavailable']);
  const abandoned = await database.superUser('payments').where({ org_id: DUNE.id, state: 'abandoned' });
  expect(abandoned).toHaveLength(1);
});
