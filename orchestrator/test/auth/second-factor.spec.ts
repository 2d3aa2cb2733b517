import { hotp, timeStep } from '../../src/auth/totp.js';
import { SecondFactorEntity } from '../../src/auth/entities/second-factor.entity.js';
import { DataSource } from 'typeorm';
import {
  createTestServer,
  testPassword,
  type Client,
  type TestServer,
} from '../server/create-test-server.js';
import { fromBase32 } from './from-base32.js';

const signInPath = '/api/v1/auth/sign-in';
const factorPath = '/api/v1/auth/second-factor';

describe('a second factor', () => {
  let server: TestServer;
  let officer: Client;
  let nowMs: number;

  beforeEach(async () => {
    server = await createTestServer();
    officer = await server.as('officer', 'safety-officer');
    nowMs = Date.now();
    jest.spyOn(Date, 'now').mockImplementation(() => nowMs);
  });
  afterEach(async () => {
    jest.restoreAllMocks();
    await server.close();
  });

  /** @returns a function that shows what the authenticator shows, and the recovery codes */
  async function setUp(): Promise<{ code: () => string; recoveryCodes: string[] }> {
    const { body } = await officer.post(factorPath).send({ password: testPassword }).expect(200);
    expect(body.secret).toMatch(/^([A-Z2-7]{4} ){7}[A-Z2-7]{4}$/);
    const secret = fromBase32(body.secret);
    const code = () => hotp(secret, timeStep(nowMs));
    const confirmed = await officer.post(`${factorPath}/confirm`).send({ code: code() }).expect(200);
    nowMs += 30_000;
    return { code, recoveryCodes: confirmed.body.recoveryCodes as string[] };
  }

  const signIn = (more: object = {}, password = testPassword) =>
    server.anyone.post(signInPath).send({ account: 'officer', password, ...more });

  it('is asked for after the right password only, and each code is taken once', async () => {
    const { code } = await setUp();
    expect((await signIn({}, 'a wrong password')).body.code).toBe('auth.failed');
    const asked = await signIn().expect(401);
    expect(asked.body.code).toBe('auth.code-needed');
    await signIn({ code: code() }).expect(200);
    const replayed = await signIn({ code: code() }).expect(401);
    expect(replayed.body.code).toBe('auth.code-wrong');
    nowMs += 30_000;
    await signIn({ code: code() }).expect(200);
  });

  it('can be stood in for by each recovery code once; they and the secret are not readable in the database', async () => {
    const { recoveryCodes } = await setUp();
    expect(new Set(recoveryCodes).size).toBe(8);
    const [first = ''] = recoveryCodes;
    await signIn({ code: first.toLowerCase() }).expect(200);
    expect((await signIn({ code: first }).expect(401)).body.code).toBe('auth.code-wrong');
    const row = await server.app
      .get(DataSource)
      .getRepository(SecondFactorEntity)
      .findOneByOrFail({ account: 'officer' });
    expect(row.recoveryHashes).toHaveLength(7);
    expect(JSON.stringify(row)).not.toContain(recoveryCodes[1]);
    expect((await officer.get(factorPath)).body).toEqual({
      isSetUp: true,
      isNeededToApprove: false,
      recoveryCodesLeft: 7,
    });
  });

  it('slows guesses of codes down', async () => {
    await setUp();
    for (let i = 0; i < 5; i += 1) await signIn({ code: '000000' }).expect(401);
    await signIn({ code: '000000' }).expect(429);
  });

  it('counts only once a code has been shown, and is not replaced by whoever finds the page open', async () => {
    await officer.post(factorPath).send({ password: testPassword }).expect(200);
    expect((await officer.post(`${factorPath}/confirm`).send({ code: '123' })).status).toBe(401);
    await signIn().expect(200);
    const { code } = await setUp();
    expect((await officer.post(factorPath).send({ password: testPassword })).body.code).toBe(
      'auth.code-needed',
    );
    const again = await officer.post(factorPath).send({ password: testPassword, code: code() }).expect(409);
    expect(again.body.code).toBe('auth.second-factor-exists');
  });

  it('allows a shorter password, which then keeps it from being removed', async () => {
    const { code } = await setUp();
    const short = 'owl kite';
    const change = { password: testPassword, code: code(), newPassword: short };
    await officer.post('/api/v1/auth/password').send(change).expect(204);
    nowMs += 30_000;
    const remove = await officer
      .post(`${factorPath}/remove`)
      .send({ password: short, code: code() })
      .expect(400);
    expect(remove.body.code).toBe('user.weak-password');
    nowMs += 30_000;
    const back = { password: short, code: code(), newPassword: testPassword };
    await officer.post('/api/v1/auth/password').send(back).expect(204);
    nowMs += 30_000;
    await officer.post(`${factorPath}/remove`).send({ password: testPassword, code: code() }).expect(204);
    await signIn().expect(200);
  });

  it('is reset by an administrator with a reason, which ends all sessions and is kept', async () => {
    await setUp();
    const administrator = await server.as('administrator', 'administrator');
    const path = '/api/v1/users/officer/second-factor/reset';
    expect((await administrator.post(path).send({})).body.errors[0].field).toBe('reason');
    await administrator.post(path).send({ reason: 'The phone fell into the sump.' }).expect(204);
    await officer.get('/api/v1/auth/session').expect(401);
    await signIn().expect(200);
    const audit = await administrator.get('/api/v1/audit?action=user.second-factor-reset');
    expect(audit.body.items[0]).toMatchObject({
      account: 'administrator',
      subject: 'officer',
      reason: 'The phone fell into the sump.',
    });
  });
});

describe('a station that asks approvers for a second factor', () => {
  it('takes no password again from one who has none', async () => {
    const server = await createTestServer({ isSecondFactorNeeded: true });
    const body = { password: testPassword };
    const officer = await server.as('officer', 'safety-officer');
    const refused = await officer.post('/api/v1/auth/reauthenticate').send(body).expect(403);
    expect(refused.body.code).toBe('auth.second-factor-needed');
    const engineer = await server.as('engineer', 'test-engineer');
    await engineer.post('/api/v1/auth/reauthenticate').send(body).expect(200);
    await server.close();
  });
});
