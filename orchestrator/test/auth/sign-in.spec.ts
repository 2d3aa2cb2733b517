import { createTestServer, testPassword, type TestServer } from '../server/create-test-server.js';

describe('signing in', () => {
  let server: TestServer;
  const signIn = (account: string, password: string) =>
    server.anyone.post('/api/v1/auth/sign-in').send({ account, password });

  beforeEach(async () => {
    server = await createTestServer();
    await server.as('engineer', 'test-engineer');
  });
  afterEach(() => server.close());

  it('answers who it is and sets a cookie that no script and no other site can use', async () => {
    const answer = await signIn('engineer', testPassword).expect(200);
    expect(answer.body).toEqual({
      account: 'engineer',
      title: 'engineer',
      roles: ['test-engineer'],
      rigLimits: [],
    });
    const cookie = answer.headers['set-cookie']?.[0] ?? '';
    expect(cookie).toMatch(/^cresthold_session=[\w-]{43};/);
    expect(cookie).toContain('HttpOnly');
    expect(cookie).toContain('SameSite=Strict');
    expect(cookie).not.toContain('Secure');
  });

  it('marks the cookie Secure where people come over HTTPS', async () => {
    const https = await createTestServer({ isHttps: true });
    await https.as('engineer', 'test-engineer');
    const answer = await https.anyone
      .post('/api/v1/auth/sign-in')
      .send({ account: 'engineer', password: testPassword });
    expect(answer.headers['set-cookie']?.[0]).toContain('Secure');
    expect(answer.headers['strict-transport-security']).toBeDefined();
    await https.close();
  });

  it('lets the cookie read the session until signed out', async () => {
    const cookie = (await signIn('engineer', testPassword)).headers['set-cookie']?.[0]?.split(';')[0] ?? '';
    const session = await server.anyone.get('/api/v1/auth/session').set('Cookie', cookie).expect(200);
    expect(session.body.account).toBe('engineer');
    const out = await server.anyone.post('/api/v1/auth/sign-out').set('Cookie', cookie).expect(204);
    expect(out.headers['set-cookie']?.[0]).toMatch(/^cresthold_session=;.*Expires=Thu, 01 Jan 1970/);
    await server.anyone.get('/api/v1/auth/session').set('Cookie', cookie).expect(401);
  });

  it('ends one session by signing out and leaves the others of the account', async () => {
    const cookies = [await signIn('engineer', testPassword), await signIn('engineer', testPassword)].map(
      (answer) => answer.headers['set-cookie']?.[0]?.split(';')[0] ?? '',
    );
    await server.anyone
      .post('/api/v1/auth/sign-out')
      .set('Cookie', cookies[0] ?? '')
      .expect(204);
    await server.anyone
      .get('/api/v1/auth/session')
      .set('Cookie', cookies[1] ?? '')
      .expect(200);
  });

  it('tells unknown account, disabled account and wrong password apart in no way', async () => {
    const administrator = await server.as('administrator', 'administrator');
    await server.as('gone', 'reader');
    await administrator.patch('/api/v1/users/gone').send({ isEnabled: false }).expect(200);
    const answers = [
      await signIn('engineer', 'not the password').expect(401),
      await signIn('nobody', testPassword).expect(401),
      await signIn('gone', testPassword).expect(401),
    ];
    for (const answer of answers) {
      expect(answer.body).toEqual(answers[0]?.body);
      expect(answer.body.code).toBe('auth.failed');
    }
  });

  it('refuses a forged, a foreign and an unsigned session', async () => {
    const none = Buffer.from('{"alg":"none"}').toString('base64url');
    const claims = Buffer.from('{"sub":"engineer","generation":1}').toString('base64url');
    for (const token of ['nonsense', `${none}.${claims}.`, `${none}.${claims}.c2lnbmF0dXJl`]) {
      const answer = await server.anyone
        .get('/api/v1/auth/session')
        .set('Cookie', `cresthold_session=${token}`);
      expect(answer.status).toBe(401);
      expect(answer.body.code).toBe('auth.required');
    }
  });

  it('slows guesses down and says how long to wait', async () => {
    for (let i = 0; i < 5; i += 1) await signIn('engineer', 'wrong guess').expect(401);
    const answer = await signIn('engineer', testPassword).expect(429);
    expect(answer.body.code).toBe('request.too-many');
    expect(Number(answer.headers['retry-after'])).toBeGreaterThanOrEqual(1);
  });

  it('names the field that is missing', async () => {
    const answer = await server.anyone.post('/api/v1/auth/sign-in').send({ account: 'engineer' }).expect(400);
    expect(answer.body.code).toBe('request.invalid');
    expect(answer.body.errors).toEqual([{ field: 'password', message: expect.any(String) }]);
  });
});
