import { z } from 'zod';
import { createStripeMock } from './server.ts';

/** The same variables as the service itself, so that both ends agree by construction. */
const Environment = z.object({
  /** Port of the service, which takes the messages. */
  PORT: z.coerce.number().int().min(1).max(65_535),
  STRIPE_API_URL: z.url(),
  STRIPE_SECRET_KEY: z.string().startsWith('sk_test_', 'must be a test key: the stand-in moves no money'),
  STRIPE_WEBHOOK_SECRET: z.string().min(8),
  NODE_ENV: z.enum(['development', 'test'], { error: 'the payment stand-in is not for production' }),
});

const read = Environment.safeParse(process.env);
if (!read.success) {
  const faults = read.error.issues.map(({ path, message }) => `  ${path.join('.')}: ${message}`);
  console.error(`The payment stand-in can’t start:\n${faults.join('\n')}`);
  process.exit(1);
}
const { PORT, STRIPE_API_URL, STRIPE_SECRET_KEY, STRIPE_WEBHOOK_SECRET } = read.data;
const own = new URL(STRIPE_API_URL);
const mock = createStripeMock({
  publicUrl: own.origin,
  secretKey: STRIPE_SECRET_KEY,
  webhookSecret: STRIPE_WEBHOOK_SECRET,
  webhookUrl: `http://127.0.0.1:${PORT}/api/v1/webhooks/payments`,
});
const server = mock.app.listen(Number(own.port), own.hostname, (error) => {
  if (!error) return;
  console.error(`The payment stand-in can’t listen on ${own.host}: ${error.message}`);
  process.exit(1);
});

const stop = () => {
  mock.stop();
  server.close(() => process.exit(0));
  server.closeAllConnections();
};
process.once('SIGTERM', stop);
process.once('SIGINT', stop);
