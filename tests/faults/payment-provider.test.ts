import { randomUUID } from 'node:crypto';
import { JSDOM } from 'jsdom';
import Stripe from 'stripe';
import { describe, expect, it } from 'vitest';
import { StripePayments } from '../../api/adapters/payments/stripe.ts';
import { deliveryMode, signatureHeader } from '../../api/adapters/payments/stripe-mock/webhooks.ts';
import { testProvider } from '../helpers/payment-provider.ts';

const provider = await testProvider();
const { STRIPE_API_URL, STRIPE_SECRET_KEY, STRIPE_WEBHOOK_SECRET } = provider.config;
const at = new URL(STRIPE_API_URL);
const sdkWith = (key: string) =>
  new Stripe(key, { host: at.hostname, port: at.port, protocol: 'http', telemetry: false, maxNetworkRetries: 0 });
const sdk = sdkWith(STRIPE_SECRET_KEY);
const payments = new StripePayments({
  secretKey: STRIPE_SECRET_KEY,
  webhookSecret: STRIPE_WEBHOOK_SECRET,
  apiUrl: STRIPE_API_URL,
});
const checkoutFor = (topUpId: string, amountMinor = 5_000) =>
  payments.openCheckout({
    topUpId,
    orgId: randomUUID(),
    amountMinor,
    currency: 'USD',
    description: 'Balance <script>alert(1)</script>',
    email: 'oda@dune.example',
    successUrl: 'http://localhost:3000/billing?session={CHECKOUT_SESSION_ID}',
    cancelUrl: 'http://localhost:3000/billing?left=1',
  });

describe('the stand-in, through the provider’s own library', () => {
  it('keeps what it was given and carries our ids on session and payment', async () => {
    const topUpId = randomUUID();
    const { sessionId } = await checkoutFor(topUpId);
    const session = await sdk.checkout.sessions.retrieve(sessionId);
    expect(session).toMatchObject({
      ...{ object: 'checkout.session', status: 'open', payment_status: 'unpaid' },
      ...{ amount_total: 5_000, currency: 'usd', client_reference_id: topUpId, livemode: false },
      metadata: { top_up_id: topUpId },
    });
    const intent = await sdk.paymentIntents.retrieve(session.payment_intent as string);
    expect(intent).toMatchObject({ amount: 5_000, metadata: { top_up_id: topUpId } });
  });

  it('opens one page for one top-up, however often it is asked', async () => {
    const orgId = randomUUID();
    const request = {
      ...{ topUpId: randomUUID(), orgId, amountMinor: 5_000, currency: 'USD', description: 'Balance' },
      ...{ email: 'oda@dune.example', successUrl: 'http://localhost:3000/a', cancelUrl: 'http://localhost:3000/b' },
    };
    const [one, two] = [await payments.openCheckout(request), await payments.openCheckout(request)];
    expect(two).toEqual(one);
    await expect(payments.openCheckout({ ...request, amountMinor: 6_000 })).rejects.toBeInstanceOf(
      Stripe.errors.StripeIdempotencyError,
    );
  });

  it('refuses a wrong key, unknown objects and unknown addresses as the provider does', async () => {
    await expect(sdkWith('sk_test_wrong').checkout.sessions.retrieve('cs_x')).rejects.toBeInstanceOf(
      Stripe.errors.StripeAuthenticationError,
    );
    await expect(sdk.checkout.sessions.retrieve('cs_x')).rejects.toMatchObject({
      code: 'resource_missing',
      statusCode: 404,
    });
    await expect(sdk.customers.list()).rejects.toMatchObject({ statusCode: 404 });
  });

  it('expires an open page once', async () => {
    const { sessionId, url } = await checkoutFor(randomUUID());
    expect(await sdk.checkout.sessions.expire(sessionId)).toMatchObject({ status: 'expired' });
    expect(await payments.findPayment(sessionId)).toMatchObject({ outcome: 'abandoned' });
    await expect(sdk.checkout.sessions.expire(sessionId)).rejects.toMatchObject({ statusCode: 400 });
    expect((await provider.choose(url, '4242424242424242')).status).toBe(409);
  });

  it('signs as the provider’s library expects, and as it signs itself', () => {
    const payload = '{"id":"evt_1","object":"event"}';
    const timestamp = Math.floor(Date.now() / 1000);
    const theirs = sdk.webhooks.generateTestHeaderString({ payload, secret: STRIPE_WEBHOOK_SECRET, timestamp });
    expect(signatureHeader(payload, STRIPE_WEBHOOK_SECRET, timestamp)).toBe(theirs);
  });

  it('chooses how messages travel by the cents of the amount', () =>
    expect([5_000, 5_011, 5_012, 5_013, 5_014].map(deliveryMode)).toEqual([
      ...['plain', 'twice', 'reversed', 'late', 'forged-first'],
    ]));
});

describe('the payment page', () => {
  const open = async (url: string) => new JSDOM(await (await fetch(url)).text()).window.document;

  it('names its amount, labels every choice and runs no script', async () => {
    const { url } = await checkoutFor(randomUUID(), 150_000);
    const page = await open(url);
    expect(page.documentElement.lang).toBe('en-GB');
    expect([...page.querySelectorAll('h1')].map((title) => title.textContent)).toEqual(['Pay by card']);
    expect(page.querySelector('.amount')!.textContent).toBe('USD 1,500.00');
    expect(page.querySelector('legend')!.textContent).toBe('Test card');
    const choices = [...page.querySelectorAll<HTMLInputElement>('input[name=card]')];
    expect(choices).toHaveLength(6);
    expect(choices.every((choice) => (choice.closest('label')?.textContent ?? '').trim() !== '')).toBe(true);
    expect(page.querySelectorAll('script, [style], [onclick]')).toHaveLength(0);
    expect(page.body.textContent).toContain('Balance <script>');
    expect((await fetch(url)).headers.get('content-security-policy')).toContain("default-src 'none'");
  });

  it('says aloud why a card wasn’t taken, and that it was none', async () => {
    const { url } = await checkoutFor(randomUUID());
    const reply = await fetch(url, { method: 'POST', body: new URLSearchParams({ card: '4000000000000069' }) });
    const declined = new JSDOM(await reply.text()).window.document;
    expect(declined.querySelector('[role=alert]')!.textContent).toContain('Your card has expired.');
    expect((await provider.choose(url, '1234')).status).toBe(400);
  });

  it('leads back only to where the service said, paid or not', async () => {
    const { url, sessionId } = await checkoutFor(randomUUID());
    const page = await open(url);
    expect(page.querySelector('main > p a')!.getAttribute('href')).toBe('http://localhost:3000/billing?left=1');
    expect((await provider.choose(url, '4242424242424242')).backTo).toBe(
      `http://localhost:3000/billing?session=${sessionId}`,
    );
    expect((await open(`${STRIPE_API_URL}/pay/cs_unknown`)).querySelector('h1')!.textContent).toBe(
      'Nothing to pay here',
    );
  });
});
