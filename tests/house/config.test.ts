import { describe, expect, it } from 'vitest';
import { readConfig } from '../../api/config.ts';

const usable = (): Record<string, string> => ({
  NODE_ENV: 'production',
  PORT: '8080',
  PUBLIC_URL: 'https://gusts.example/',
  DATABASE_URL: 'postgres://gustloom_app@db.example/gustloom',
  TOKEN_SECRET: 'a secret for tests, long enough for them',
  CSRF_SECRET: 'another secret for tests, as long as that',
  SMTP_URL: 'smtps://mail.example',
  MAIL_FROM: 'Gustloom <no-reply@gusts.example>',
  STRIPE_SECRET_KEY: 'sk_test_0000000000000000',
  STRIPE_WEBHOOK_SECRET: 'whsec_0000000000000000',
});
/** The names at fault, in the order they are listed. */
const faultsOf = (environment: Record<string, string>): string[] => {
  try {
    readConfig(environment);
  } catch (error) {
    const [head, ...faults] = (error as Error).message.split('\n');
    expect(head).toBe('The configuration isn’t usable:');
    return faults.map((line) => /^ {2}([A-Z_]+): \S/.exec(line)![1]!);
  }
  return [];
};
const without = (...names: string[]) =>
  Object.fromEntries(Object.entries(usable()).filter(([name]) => !names.includes(name)));

describe('the configuration', () => {
  it('is read from the environment and can’t be changed afterwards', () => {
    const config = readConfig({ ...usable(), TRUSTED_PROXIES: '1', COMPUTE_THREADS: '4' });
    expect(config).toMatchObject({
      environment: 'production',
      port: 8080,
      publicUrl: 'https://gusts.example',
      trustedProxies: 1,
      computeThreads: 4,
      mail: { sinkFolder: null },
      stripe: { apiUrl: null },
    });
    for (const part of [config, config.mail, config.stripe]) expect(Object.isFrozen(part)).toBe(true);
  });

  it('names everything that is missing at once', () => {
    expect(faultsOf({}).sort()).toEqual(Object.keys(usable()).sort());
  });
  it('names everything that is wrong at once', () => {
    const wrong = {
      NODE_ENV: 'staging',
      PORT: '70000',
      PUBLIC_URL: 'gusts',
      DATABASE_URL: 'mysql://db.example/gustloom',
      TOKEN_SECRET: 'short',
      CSRF_SECRET: 'x'.repeat(31),
      SMTP_URL: 'http://mail.example',
      MAIL_FROM: '',
      STRIPE_SECRET_KEY: 'sk',
      STRIPE_WEBHOOK_SECRET: '',
      STRIPE_API_URL: 'nowhere',
      TRUSTED_PROXIES: '-1',
      COMPUTE_THREADS: 'many',
      LOG_LEVEL: 'loud',
    };
    expect(faultsOf(wrong).sort()).toEqual(Object.keys(wrong).sort());
  });
  it('says nothing of what a secret is', () => {
    expect(() => readConfig({ ...usable(), TOKEN_SECRET: 'hunter2' })).toThrow(/^(?!.*hunter2).*$/s);
  });

  // A missing number is asked for; an empty one isn't nought.
  it.each(['', ' ', 'x', '1.5', '0', '-3', '65536', 'NaN', 'Infinity'])('takes no port from “%s”', (PORT) => {
    expect(faultsOf({ ...usable(), PORT })).toEqual(['PORT']);
  });
  it('has no port of its own', () => expect(faultsOf(without('PORT'))).toEqual(['PORT']));
  it.each(['0', '257', '2.5', 'two', '-1'])('takes no count of threads from “%s”', (COMPUTE_THREADS) => {
    expect(faultsOf({ ...usable(), COMPUTE_THREADS })).toEqual(['COMPUTE_THREADS']);
  });
  it('leaves the count of threads to whoever starts them when it is left out or empty', () => {
    expect(readConfig(usable()).computeThreads).toBeNull();
    expect(readConfig({ ...usable(), COMPUTE_THREADS: '' }).computeThreads).toBeNull();
  });
  it.each(['6', '0.5', 'all'])('trusts no proxies by “%s”', (TRUSTED_PROXIES) => {
    expect(faultsOf({ ...usable(), TRUSTED_PROXIES })).toEqual(['TRUSTED_PROXIES']);
  });
  it.each(['0', '-6', '8761', 'never'])('takes no age of stale tracks from “%s”', (STALE_AFTER_HOURS) => {
    expect(faultsOf({ ...usable(), STALE_AFTER_HOURS })).toEqual(['STALE_AFTER_HOURS']);
  });
  it('calls a track stale after six hours unless told otherwise', () => {
    expect(readConfig({ ...usable(), STALE_AFTER_HOURS: '' }).staleAfterHours).toBe(6);
    expect(readConfig({ ...usable(), STALE_AFTER_HOURS: '3.5' }).staleAfterHours).toBe(3.5);
  });
  it('trusts no proxy unless told to', () => expect(readConfig(usable()).trustedProxies).toBe(0));
});

describe('production', () => {
  const standIns = { STRIPE_API_URL: 'http://127.0.0.1:4010', MAIL_SINK_FOLDER: '/var/mail-sink' };
  it('refuses stand-ins and plain http, all of them at once', () => {
    expect(faultsOf({ ...usable(), ...standIns, PUBLIC_URL: 'http://gusts.example' }).sort()).toEqual([
      'MAIL_SINK_FOLDER',
      'PUBLIC_URL',
      'STRIPE_API_URL',
    ]);
  });
  it.each(['http://gusts.example', 'ftp://gusts.example', 'gusts.example'])('isn’t reached at %s', (PUBLIC_URL) => {
    expect(faultsOf({ ...usable(), PUBLIC_URL })).toEqual(['PUBLIC_URL']);
  });
  it('is the only place that refuses them', () => {
    for (const NODE_ENV of ['development', 'test']) {
      const config = readConfig({ ...usable(), ...standIns, NODE_ENV, PUBLIC_URL: 'http://localhost:8080' });
      expect(config.stripe.apiUrl).toBe(standIns.STRIPE_API_URL);
      expect(config.mail.sinkFolder).toBe(standIns.MAIL_SINK_FOLDER);
    }
  });
  it('isn’t assumed, and neither is anything else', () => expect(faultsOf(without('NODE_ENV'))).toEqual(['NODE_ENV']));
  it('says what is wrong with a stand-in beside anything else at fault', () => {
    expect(faultsOf({ ...without('PUBLIC_URL'), ...standIns, PORT: 'x' }).sort()).toEqual([
      'MAIL_SINK_FOLDER',
      'PORT',
      'PUBLIC_URL',
      'STRIPE_API_URL',
    ]);
  });
});
