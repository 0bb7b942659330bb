import type { Express, Router } from 'express';
import pino from 'pino';
import request, { type Test } from 'supertest';
import { afterAll } from 'vitest';
import type { Role } from '#contract/roles.ts';
import { NOTICE_VERSION } from '#contract/notices.ts';
import { Session } from '#contract/session.ts';
import { createApp } from '../../api/app.ts';
import { readConfig } from '../../api/config.ts';
import { createContainer, type Container, type Overrides } from '../../api/container.ts';
import { testDatabase, type TestDatabase } from './database.ts';
import { FakeClock, FakeMail } from './fakes.ts';
import { inlinePool } from './inline-pool.ts';
import { addOrganisations, DUNE, PASSWORD, REEF, type TestOrganisation } from './people.ts';

const API = '/api/v1';

/** A signed-in person's browser: cookies, CSRF token and a fresh Idempotency-Key with every change. */
export interface Browser {
  session: Session;
  get(path: string): Test;
  post(path: string, body?: object, headers?: Record<string, string>): Test;
  put(path: string, body?: object, headers?: Record<string, string>): Test;
  delete(path: string, headers?: Record<string, string>): Test;
  /** A request without anything added but the cookies. */
  bare: ReturnType<typeof request.agent>;
}

export interface TestApp {
  app: Express;
  container: Container;
  database: TestDatabase;
  clock: FakeClock;
  mail: FakeMail;
  signIn(role: Role, options?: { org?: TestOrganisation; accept?: boolean }): Promise<Browser>;
}

export const testConfig = (databaseUrl: string, more: Record<string, string> = {}) =>
  readConfig({
    NODE_ENV: 'test',
    PORT: '3000',
    PUBLIC_URL: 'http://localhost:3000',
    DATABASE_URL: databaseUrl,
    TOKEN_SECRET: 'a secret for tests, long enough for them',
    CSRF_SECRET: 'another secret for tests, as long as that',
    LOG_LEVEL: 'silent',
    SMTP_URL: 'smtp://127.0.0.1:9',
    MAIL_FROM: 'Gustloom <no-reply@gustloom.example>',
    STRIPE_SECRET_KEY: 'sk_test_0000000000000000',
    STRIPE_WEBHOOK_SECRET: 'whsec_0000000000000000',
    STRIPE_API_URL: 'http://127.0.0.1:9',
    ...more,
  });

interface Options extends Overrides {
  /** Routers beside the product's own, to try what the product never does. */
  routers?: Router[];
  config?: Record<string, string>;
}

let keys = 0;

/** The whole API on a database of its own, with two organisations of four people each. Call it with await, at the top. */
export const createTestApp = async ({ routers = [], config = {}, ...overrides }: Options = {}): Promise<TestApp> => {
  const database = await testDatabase();
  await addOrganisations(database.owner, DUNE, REEF);
  const clock = new FakeClock();
  const mail = new FakeMail();
  const log = pino({ level: 'silent' });
  const container = createContainer(testConfig(database.appUrl, config), 'api', {
    clock,
    mail,
    log,
    pool: inlinePool(),
    ...overrides,
  });
  await container.queue.start();
  afterAll(() => container.close());
  const { appParts } = container;
  const app = createApp({ ...appParts, routers: [...appParts.routers, ...routers] });

  const signIn: TestApp['signIn'] = async (role, { org = DUNE, accept = true } = {}) => {
    const bare = request.agent(app);
    const signedIn = await bare
      .post(`${API}/session`)
      .send({ email: org.people[role].email, password: PASSWORD })
      .expect(201);
    let session = Session.parse(signedIn.body);
    const change = (test: Test, body: object | undefined, headers: Record<string, string>): Test => {
      keys += 1;
      const sent = test.set({ 'X-CSRF-Token': session.csrfToken, 'Idempotency-Key': `test-key-${keys}`, ...headers });
      return body === undefined ? sent : sent.send(body);
    };
    const browser: Browser = {
      bare,
      session,
      get: (path) => bare.get(API + path),
      post: (path, body, headers = {}) => change(bare.post(API + path), body, headers),
      put: (path, body, headers = {}) => change(bare.put(API + path), body, headers),
      delete: (path, headers = {}) => change(bare.delete(API + path), undefined, headers),
    };
    if (accept && session.acceptanceRequired) {
      const accepted = await browser
        .post('/session/acceptance', { version: NOTICE_VERSION, name: org.people[role].name })
        .expect(200);
      session = Session.parse(accepted.body);
      browser.session = session;
    }
    return browser;
  };
  return { app, container, database, clock, mail, signIn };
};
