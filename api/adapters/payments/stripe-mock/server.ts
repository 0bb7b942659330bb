import { createHash, randomBytes } from 'node:crypto';
import { fileURLToPath } from 'node:url';
import express, { type Express, type NextFunction, type Request, type Response } from 'express';
import { TEST_CARDS } from './cards.ts';
import { closedPage, confirmPage, payPage } from './pages.ts';
import { SessionBook, type Metadata, type PaymentIntent, type Session } from './sessions.ts';
import { WebhookSender, deliveryMode, type MockEvent } from './webhooks.ts';

export type StripeMockSettings = {
  /** Address people and the API reach this server at, without a slash at its end. */
  publicUrl: string;
  secretKey: string;
  webhookSecret: string;
  webhookUrl: string;
  /** How long a slow payment takes. */
  slowMs?: number;
  lateMs?: number;
  retryMs?: readonly number[];
  nowS?: () => number;
};

export type StripeMock = {
  app: Express;
  /** Lets slow payments clear now, and resolves when no message is on its way. */
  settled(): Promise<void>;
  stop(): void;
};

type Form = { [key: string]: string | Form | (string | Form)[] | undefined };
type ApiError = { type: string; message: string; code?: string; param?: string };

const folder = (path: string) => fileURLToPath(new URL(path, import.meta.url));
const text = (value: Form[string]): string | null => (typeof value === 'string' ? value : null);
const form = (value: Form[string]): Form => {
  if (Array.isArray(value)) return Object.fromEntries(value.map((cell, index) => [String(index), cell]));
  return typeof value === 'object' ? value : {};
};
const metadataOf = (value: Form[string]): Metadata =>
  Object.fromEntries(
    Object.entries(form(value)).flatMap(([key, cell]) => (typeof cell === 'string' ? [[key, cell]] : [])),
  );

/**
 * A small stand-in for the part of Stripe's HTTP API that top-ups use, with its hosted payment page and signed messages.
 *
 * Bodies are form-encoded with brackets, every value a string; a repeated Idempotency-Key replays the first reply.
 */
export const createStripeMock = (settings: StripeMockSettings): StripeMock => {
  const nowS = settings.nowS ?? (() => Math.floor(Date.now() / 1000));
  const slowMs = settings.slowMs ?? 4_000;
  const book = new SessionBook(settings.publicUrl, nowS);
  const sender = new WebhookSender({
    url: settings.webhookUrl,
    secret: settings.webhookSecret,
    nowS,
    lateMs: settings.lateMs ?? 5_000,
    retryMs: settings.retryMs ?? [500, 2_000, 10_000, 30_000],
  });
  const replies = new Map<string, { fingerprint: string; status: number; body: unknown }>();
  const slow = new Set<{ timer: NodeJS.Timeout; settle: () => void }>();

  const announce = (session: Session, events: MockEvent[]) => sender.send(events, deliveryMode(session.amount_total));
  const intentOf = (session: Session): PaymentIntent => book.intent(session.payment_intent)!;

  const pay = (session: Session) => {
    const intent = intentOf(session);
    Object.assign(intent, { status: 'succeeded', last_payment_error: null });
    Object.assign(session, { status: 'complete', payment_status: 'paid', url: null });
    announce(session, [
      sender.event('payment_intent.succeeded', intent),
      sender.event('checkout.session.completed', session),
    ]);
  };
  const paySlowly = (session: Session) => {
    const intent = intentOf(session);
    intent.status = 'processing';
    Object.assign(session, { status: 'complete', url: null });
    const completed = sender.event('checkout.session.completed', session);
    // Reversed, the good news overtakes the message that the page was completed.
    const reversed = deliveryMode(session.amount_total) === 'reversed';
    if (!reversed) announce(session, [completed]);
    const settle = () => {
      slow.delete(entry);
      intent.status = 'succeeded';
      session.payment_status = 'paid';
      const cleared = sender.event('checkout.session.async_payment_succeeded', session);
      announce(session, reversed ? [completed, cleared] : [cleared]);
    };
    const entry = { timer: setTimeout(settle, slowMs), settle };
    slow.add(entry);
  };
  const decline = (session: Session, error: PaymentIntent['last_payment_error']) => {
    const intent = intentOf(session);
    Object.assign(intent, { status: 'requires_payment_method', last_payment_error: error });
    announce(session, [sender.event('payment_intent.payment_failed', intent)]);
  };

  const app = express();
  app.disable('x-powered-by');
  app.use('/fonts', express.static(folder('../../../../fonts'), { maxAge: '1d' }));
  app.get('/pay.css', (_req, res) => res.sendFile(folder('pay.css')));
  app.use((_req, res, next) => {
    res.set({
      'request-id': `req_${randomBytes(8).toString('hex')}`,
      'content-security-policy': "default-src 'none'; style-src 'self'; font-src 'self'; base-uri 'none'",
      'referrer-policy': 'no-referrer',
      'cache-control': 'no-store',
    });
    next();
  });
  app.use(express.urlencoded({ extended: true, limit: '100kb' }));

  const refuse = (res: Response, status: number, error: ApiError) => res.status(status).json({ error });
  const authorise = (req: Request, res: Response, next: NextFunction) => {
    if (req.get('authorization') === `Bearer ${settings.secretKey}`) next();
    else refuse(res, 401, { type: 'invalid_request_error', message: 'Invalid API Key provided.' });
  };
  const replay = (req: Request, res: Response, next: NextFunction) => {
    const key = req.method === 'POST' ? req.get('idempotency-key') : undefined;
    if (!key) return next();
    const fingerprint = createHash('sha256')
      .update(`${req.path}\n${JSON.stringify(req.body ?? null)}`)
      .digest('hex');
    const earlier = replies.get(key);
    if (earlier && earlier.fingerprint !== fingerprint) {
      return refuse(res, 400, {
        type: 'idempotency_error',
        message: 'Keys for idempotent requests can only be used with the same parameters they were first used with.',
      });
    }
    if (earlier) return res.set('idempotent-replayed', 'true').status(earlier.status).json(earlier.body);
    const send = res.json.bind(res);
    res.json = (body: unknown) => {
      replies.set(key, { fingerprint, status: res.statusCode, body: structuredClone(body) });
      return send(body);
    };
    next();
  };
  app.use('/v1', authorise, replay);

  app.post('/v1/checkout/sessions', (req, res) => {
    const body = form(req.body as Form);
    const item = form(form(body.line_items)['0']);
    const price = form(item.price_data);
    const amount = Number(text(price.unit_amount)) * Number(text(item.quantity));
    const currency = text(price.currency);
    const successUrl = text(body.success_url);
    if (text(body.mode) !== 'payment' || !currency || !successUrl || !Number.isSafeInteger(amount) || amount <= 0) {
      return refuse(res, 400, {
        type: 'invalid_request_error',
        code: 'parameter_missing',
        message: 'A payment needs mode, line_items with price_data and quantity, and success_url.',
      });
    }
    return res.json(
      book.open({
        amount,
        currency,
        description: text(form(price.product_data).name) ?? '',
        clientReferenceId: text(body.client_reference_id),
        email: text(body.customer_email),
        metadata: metadataOf(body.metadata),
        intentMetadata: metadataOf(form(body.payment_intent_data).metadata),
        successUrl,
        cancelUrl: text(body.cancel_url),
      }),
    );
  });
  const missing = (res: Response, what: string, id: string) =>
    refuse(res, 404, {
      type: 'invalid_request_error',
      code: 'resource_missing',
      message: `No such ${what}: '${id}'`,
      param: 'id',
    });
  app.get('/v1/checkout/sessions/:id', (req, res) => {
    const session = book.session(req.params.id);
    return session ? res.json(session) : missing(res, 'checkout.session', req.params.id);
  });
  app.post('/v1/checkout/sessions/:id/expire', (req, res) => {
    const session = book.session(req.params.id);
    if (!session) return missing(res, 'checkout.session', req.params.id);
    if (session.status !== 'open') {
      return refuse(res, 400, {
        type: 'invalid_request_error',
        message: `Only Checkout Sessions with a status in ["open"] can be expired. This one is ${session.status}.`,
      });
    }
    Object.assign(session, { status: 'expired', url: null });
    announce(session, [sender.event('checkout.session.expired', session)]);
    return res.json(session);
  });
  app.get('/v1/payment_intents/:id', (req, res) => {
    const intent = book.intent(req.params.id);
    return intent ? res.json(intent) : missing(res, 'payment_intent', req.params.id);
  });
  app.use('/v1', (req, res) =>
    refuse(res, 404, {
      type: 'invalid_request_error',
      message: `Unrecognized request URL (${req.method}: ${req.originalUrl}).`,
    }),
  );

  const payable = (req: Request<{ id: string }>, res: Response): Session | null => {
    const session = book.session(req.params.id);
    if (session?.status === 'open') return session;
    res
      .status(session ? 409 : 404)
      .type('html')
      .send(
        closedPage(
          session
            ? 'This payment is already closed.'
            : 'We don’t know this payment. The stand-in forgets when it stops.',
          session?.cancel_url ?? null,
        ),
      );
    return null;
  };
  const backTo = (res: Response, session: Session) =>
    res.redirect(303, session.success_url.replace('{CHECKOUT_SESSION_ID}', session.id));
  const refused = (res: Response, session: Session) =>
    res
      .status(402)
      .type('html')
      .send(payPage(session, book.description(session.id), intentOf(session).last_payment_error?.message ?? null));

  app.get('/pay/:id', (req, res) => {
    const session = payable(req, res);
    if (session) res.type('html').send(payPage(session, book.description(session.id), null));
  });
  app.post('/pay/:id', (req, res) => {
    const session = payable(req, res);
    if (!session) return;
    const card = TEST_CARDS.find(({ number }) => number === text(form(req.body as Form).card));
    if (!card) {
      res
        .status(400)
        .type('html')
        .send(payPage(session, book.description(session.id), 'No card was chosen.'));
      return;
    }
    switch (card.plays.kind) {
      case 'pays':
        pay(session);
        backTo(res, session);
        return;
      case 'slow':
        paySlowly(session);
        backTo(res, session);
        return;
      case 'authenticates':
        intentOf(session).status = 'requires_action';
        announce(session, [sender.event('payment_intent.requires_action', intentOf(session))]);
        res.type('html').send(confirmPage(session, book.description(session.id)));
        return;
      case 'declined':
        decline(session, card.plays.error);
        refused(res, session);
        return;
    }
  });
  app.post('/pay/:id/confirm', (req, res) => {
    const session = payable(req, res);
    if (!session) return;
    if (text(form(req.body as Form).answer) === 'yes' && intentOf(session).status === 'requires_action') {
      pay(session);
      backTo(res, session);
      return;
    }
    decline(session, {
      type: 'card_error',
      code: 'payment_intent_authentication_failure',
      message: 'The bank’s question was answered with no.',
    });
    refused(res, session);
  });
  app.use((_req, res) => {
    res.status(404).type('html').send(closedPage('There is no such page.', null));
  });

  return {
    app,
    async settled() {
      for (const { timer, settle } of slow) {
        clearTimeout(timer);
        settle();
      }
      await sender.settled();
    },
    stop() {
      for (const { timer } of slow) clearTimeout(timer);
      slow.clear();
      sender.stop();
    },
  };
};
