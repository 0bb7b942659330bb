import jwt from 'jsonwebtoken';
import request from 'supertest';
import { beforeEach, describe, expect, it } from 'vitest';
import { NOTICE_VERSION } from '#contract/notices.ts';
import { createTestApp, testConfig } from '../helpers/app.ts';
import { DUNE, PASSWORD, REEF } from '../helpers/people.ts';

const { app, database, clock, signIn } = await createTestApp();
const underwriter = DUNE.people.underwriter;
const SESSION = '/api/v1/session';
const setCookies = (reply: request.Response) => reply.get('Set-Cookie') ?? [];
const cookie = (reply: request.Response, name: string) =>
  setCookies(reply)
    .find((line) => line.startsWith(`${name}=`))
    ?.split(';')[0] ?? '';
const enter = (email = underwriter.email, password = PASSWORD) => request(app).post(SESSION).send({ email, password });

beforeEach(() => database.superUser('sign_in_failures').delete());

describe('signing in', () => {
  it('starts a session whose tokens no script can read', async () => {
    const reply = await enter().expect(201);
    expect(reply.body).toMatchObject({
      person: { name: underwriter.name },
      organisation: { name: DUNE.name },
      roles: ['underwriter'],
    });
    for (const line of setCookies(reply)) {
      expect(line).toContain('HttpOnly');
      expect(line).toContain('SameSite=Lax');
    }
    expect(setCookies(reply).find((line) => line.startsWith('gustloom_refresh'))).toContain('Path=/api/v1/session');
  });
  it('takes an address however it is written', () => enter(underwriter.email.toUpperCase()).expect(201));
  it('gives one answer for a wrong password and for an unknown address', async () => {
    const wrong = await enter(underwriter.email, 'not it').expect(401);
    const unknown = await enter('nobody@nowhere.example').expect(401);
    expect({ ...wrong.body, requestId: '' }).toEqual({ ...unknown.body, requestId: '' });
    expect(wrong.body.code).toBe('wrong_sign_in');
    expect(setCookies(wrong)).toEqual([]);
  });
  it('is locked for a while after repeated failures, known address or not', async () => {
    for (const email of [underwriter.email, 'nobody@nowhere.example']) {
      for (let attempt = 0; attempt < 8; attempt += 1) await enter(email, 'not it').expect(401);
      const locked = await enter(email).expect(429);
      expect(locked.body.code).toBe('too_many_requests');
      expect(Number(locked.get('Retry-After'))).toBeGreaterThan(600);
    }
    clock.pass(15 * 60_000 + 1000);
    await enter().expect(201);
  });
  it('marks its cookies Secure in production', async () => {
    const production = {
      NODE_ENV: 'production',
      PUBLIC_URL: 'https://gustloom.example',
      STRIPE_API_URL: '',
    };
    const secure = await createTestApp({ config: production });
    const reply = await request(secure.app)
      .post(SESSION)
      .send({ email: underwriter.email, password: PASSWORD })
      .expect(201);
    for (const line of setCookies(reply)) expect(line).toContain('Secure');
    expect(reply.get('Strict-Transport-Security')).toContain('max-age');
  });
});

describe('an access token', () => {
  const { tokenSecret } = testConfig('postgres://unused/unused');
  const as = (token: string) => request(app).get(SESSION).set('Cookie', `gustloom_access=${token}`);
  const claimsOf = async () => {
    const token = cookie(await enter(), 'gustloom_access').split('=')[1]!;
    const { sub, org, sid, ver } = jwt.decode(token) as Record<string, string | number>;
    return { token, claims: { sub, org, sid, ver } };
  };

  it('opens the session it was made for', async () => {
    const { token } = await claimsOf();
    await as(token).expect(200);
  });
  it('is over after ten minutes', async () => {
    const { claims } = await claimsOf();
    const past = { ...claims, iat: Math.floor(Date.now() / 1000) - 601 };
    await as(jwt.sign(past, tokenSecret, { issuer: 'gustloom', expiresIn: 600 })).expect(401);
  });
  it('counts for nothing when signed by somebody else, unsigned, or of another issuer', async () => {
    const { claims } = await claimsOf();
    await as(jwt.sign(claims, 'x'.repeat(40), { issuer: 'gustloom', expiresIn: 600 })).expect(401);
    await as(jwt.sign(claims, '', { issuer: 'gustloom', expiresIn: 600, algorithm: 'none' })).expect(401);
    await as(jwt.sign(claims, tokenSecret, { issuer: 'another', expiresIn: 600 })).expect(401);
    await as('nonsense').expect(401);
  });
  it('ends when the person’s rights change', async () => {
    const browser = await signIn('auditor');
    await browser.get('/session').expect(200);
    const membership = () =>
      database.superUser('memberships').where({ org_id: DUNE.id, user_id: DUNE.people.auditor.id });
    const before = await membership().first('version');
    await membership().update({ roles: ['auditor', 'modeler'] });
    expect((await membership().first('version')).version).toBe(before.version + 1);
    await browser.get('/session').expect(401);
    // The renewed token carries the new rights.
    const renewed = await browser.bare.post(`${SESSION}/refresh`).expect(200);
    expect(renewed.body.roles).toEqual(['auditor', 'modeler']);
    await membership().update({ roles: ['auditor'] });
  });
  it('ends when the membership does, and can’t be renewed', async () => {
    const browser = await signIn('admin', { org: REEF });
    const membership = () =>
      database.superUser('memberships').where({ org_id: REEF.id, user_id: REEF.people.admin.id });
    await membership().update({ ended_at: new Date() });
    await browser.get('/session').expect(401);
    await browser.bare.post(`${SESSION}/refresh`).expect(401);
    await enter(REEF.people.admin.email).expect(401);
    await membership().update({ ended_at: null });
  });
});

describe('renewing', () => {
  const renew = (refresh: string) => request(app).post(`${SESSION}/refresh`).set('Cookie', refresh);

  it('gives a new pair each time', async () => {
    const first = cookie(await enter(), 'gustloom_refresh');
    const second = await renew(first).expect(200);
    expect(cookie(second, 'gustloom_refresh')).not.toBe(first);
    await renew(cookie(second, 'gustloom_refresh')).expect(200);
  });
  it('keeps two tabs that renew at the same moment', async () => {
    const token = cookie(await enter(), 'gustloom_refresh');
    const replies = await Promise.all([renew(token), renew(token)]);
    expect(replies.map(({ status }) => status)).toEqual([200, 200]);
  });
  it('ends the whole session when a used token comes back later', async () => {
    const entered = await enter();
    const stolen = cookie(entered, 'gustloom_refresh');
    const renewed = await renew(stolen).expect(200);
    clock.pass(60_000);
    await renew(stolen).expect(401);
    await renew(cookie(renewed, 'gustloom_refresh')).expect(401);
    await request(app).get(SESSION).set('Cookie', cookie(renewed, 'gustloom_access')).expect(401);
    const noted = await database.superUser('audit_entries').where({ action: 'session.revoked' });
    expect(noted).toHaveLength(1);
  });
  it('is over after a fortnight', async () => {
    const token = cookie(await enter(), 'gustloom_refresh');
    clock.pass(14 * 24 * 3600_000 + 1000);
    await renew(token).expect(401);
  });
  it('refuses tokens that aren’t ours, of whatever form', async () => {
    for (const made of ['', 'x', `${DUNE.id}.${'A'.repeat(43)}`, `${REEF.id}'; drop table users; --`])
      await renew(`gustloom_refresh=${encodeURIComponent(made)}`).expect(401);
  });
  it('keeps only digests', async () => {
    const token = decodeURIComponent(cookie(await enter(), 'gustloom_refresh').split('=')[1]!);
    const rows = await database.superUser('refresh_tokens').where({ digest: token });
    expect(rows).toEqual([]);
  });
});

describe('signing out', () => {
  it('ends the session at once and clears the cookies', async () => {
    const browser = await signIn('underwriter');
    const before = browser.bare.jar.getCookie('gustloom_access', {
      domain: '127.0.0.1',
      path: '/',
      secure: false,
      script: false,
    });
    const reply = await browser.delete('/session').expect(204);
    expect(setCookies(reply).every((line) => /Expires=Thu, 01 Jan 1970/.test(line))).toBe(true);
    await request(app).get(SESSION).set('Cookie', `gustloom_access=${before?.value}`).expect(401);
  });
  it('works from the refresh token alone, once the access token has run out', async () => {
    const refresh = cookie(await enter(), 'gustloom_refresh');
    await request(app).delete(SESSION).set('Cookie', refresh).expect(204);
    await request(app).post(`${SESSION}/refresh`).set('Cookie', refresh).expect(401);
  });
  it('is fine for strangers', () => request(app).delete(SESSION).expect(204));
});

describe('the standing notes', () => {
  it('must be accepted before anything else, and the acceptance is recorded by version and name', async () => {
    const browser = await signIn('modeler', { org: REEF, accept: false });
    expect(browser.session.acceptanceRequired).toBe(NOTICE_VERSION);
    const refused = await browser.get('/portfolios').expect(403);
    expect(refused.body.code).toBe('acceptance_required');
    await browser.post('/session/acceptance', { version: '2020-01-01', name: 'Mo Reef' }).expect(409);
    const accepted = await browser
      .post('/session/acceptance', { version: NOTICE_VERSION, name: ' Mo Reef ' })
      .expect(200);
    expect(accepted.body.acceptanceRequired).toBeNull();
    const [row] = await database.superUser('acceptances').where({ user_id: REEF.people.modeler.id });
    expect(row).toMatchObject({ version: NOTICE_VERSION, name: 'Mo Reef', org_id: REEF.id });
    const [noted] = await database
      .superUser('audit_entries')
      .where({ action: 'notes.accepted', actor_id: REEF.people.modeler.id });
    expect(noted.details).toEqual({ name: 'Mo Reef' });
  });
  it('are accepted once; a repeat changes nothing', async () => {
    const browser = await signIn('modeler', { org: REEF });
    await browser.post('/session/acceptance', { version: NOTICE_VERSION, name: 'Somebody Else' }).expect(200);
    const rows = await database.superUser('acceptances').where({ user_id: REEF.people.modeler.id });
    expect(rows.map(({ name }) => name)).toEqual(['Mo Reef']);
  });
});
