import { createServer, type RequestListener, type Server } from 'node:http';
import type { AddressInfo } from 'node:net';
import { afterAll } from 'vitest';
import { createStripeMock, type StripeMock } from '../../api/adapters/payments/stripe-mock/server.ts';

const listening = (server: Server): Promise<string> =>
  new Promise((resolve) => {
    server.listen(0, '127.0.0.1', () => resolve(`http://127.0.0.1:${(server.address() as AddressInfo).port}`));
  });

export interface TestProvider {
  mock: StripeMock;
  /** What the service is configured with. */
  config: { STRIPE_API_URL: string; STRIPE_SECRET_KEY: string; STRIPE_WEBHOOK_SECRET: string };
  /** Gives the provider's messages to the service; until then nobody answers them. */
  deliverTo(app: RequestListener): void;
  /** From now on messages are lost. */
  loseMessages(): void;
  /** Chooses a card on the payment page, as a person would; gives the page's status. */
  choose(checkoutUrl: string, card: string): Promise<{ status: number; backTo: string | null }>;
  confirm(checkoutUrl: string, answer: 'yes' | 'no'): Promise<{ status: number; backTo: string | null }>;
  /** Stops answering: the provider is down. */
  goDown(): Promise<void>;
}

/** The local payment stand-in on a port of its own, quick enough for tests. */
export const testProvider = async (): Promise<TestProvider> => {
  const secrets = { STRIPE_SECRET_KEY: 'sk_test_of_the_tests', STRIPE_WEBHOOK_SECRET: 'whsec_of_the_tests' };
  let listener: RequestListener | null = null;
  const service = createServer((req, res) => {
    if (listener) listener(req, res);
    else res.writeHead(503).end();
  });
  const provider = createServer();
  const [serviceUrl, publicUrl] = await Promise.all([listening(service), listening(provider)]);
  const mock = createStripeMock({
    publicUrl,
    secretKey: secrets.STRIPE_SECRET_KEY,
    webhookSecret: secrets.STRIPE_WEBHOOK_SECRET,
    webhookUrl: `${serviceUrl}/api/v1/webhooks/payments`,
    slowMs: 60_000,
    lateMs: 30,
    retryMs: [20, 20],
  });
  provider.on('request', mock.app as RequestListener);
  const close = (server: Server) =>
    new Promise<void>((resolve) => {
      server.close(() => resolve());
      server.closeAllConnections();
    });
  afterAll(async () => {
    mock.stop();
    await Promise.all([close(service), close(provider)]);
  });
  const submit = async (url: string, fields: Record<string, string>) => {
    const reply = await fetch(url, { method: 'POST', redirect: 'manual', body: new URLSearchParams(fields) });
    await reply.arrayBuffer();
    return { status: reply.status, backTo: reply.headers.get('location') };
  };
  return {
    mock,
    config: { ...secrets, STRIPE_API_URL: publicUrl },
    deliverTo: (app) => {
      listener = app;
    },
    loseMessages: () => {
      listener = null;
    },
    choose: (checkoutUrl, card) => submit(checkoutUrl, { card }),
    confirm: (checkoutUrl, answer) => submit(`${checkoutUrl}/confirm`, { answer }),
    goDown: () => close(provider),
  };
};
