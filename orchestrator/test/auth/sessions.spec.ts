import { DataSource } from 'typeorm';
import { SessionEntity } from '../../src/auth/entities/session.entity.js';
import {
  createTestServer,
  testPassword,
  type Client,
  type TestServer,
} from '../server/create-test-server.js';

const sessionPath = '/api/v1/auth/session';
const sessionsPath = '/api/v1/auth/sessions';

describe('sessions', () => {
  let server: TestServer;
  let nowMs: number;

  beforeEach(async () => {
    server = await createTestServer();
    await server.as('engineer', 'test-engineer');
    nowMs = Date.now();
    jest.spyOn(Date, 'now').mockImplementation(() => nowMs);
  });
  afterEach(async () => {
    jest.restoreAllMocks();
    await server.close();
  });

  const cookieOf = ({ headers }: { headers: Record<string, unknown> }) =>
    (headers['set-cookie'] as string[] | undefined)?.[0]?.split(';')[0] ?? '';
  const signIn = async (account = 'engineer', before = '') =>
    cookieOf(
      await server.anyone
        .post('/api/v1/auth/sign-in')
        .set('Cookie', before)
        .set('User-Agent', 'Bench browser')
        .send({ account, password: testPassword })
        .expect(200),
    );
  const get = (cookie: string, path = sessionPath) => server.anyone.get(path).set('Cookie', cookie);

  it('have a token of 256 random bits, of which the database knows the hash only', async () => {
    const cookie = await signIn();
    const token = cookie.split('=')[1] ?? '';
    expect(Buffer.from(token, 'base64url')).toHaveLength(32);
    const rows = await server.app.get(DataSource).getRepository(SessionEntity).find();
    expect(JSON.stringify(rows)).not.toContain(token);
  });

  it('end at sign-out for good, and the others stay, through a restart', async () => {
    const [left, kept] = [await signIn(), await signIn()];
    await server.anyone.post('/api/v1/auth/sign-out').set('Cookie', left).expect(204);
    await server.app.close();
    const again = await createTestServer({ dataFolder: server.config.dataFolder });
    await again.anyone.get(sessionPath).set('Cookie', left).expect(401);
    await again.anyone.get(sessionPath).set('Cookie', kept).expect(200);
    server = again;
  });

  it('are listed with browser, address and times, and ended one by one or all but this', async () => {
    const [here, there, elsewhere] = [await signIn(), await signIn(), await signIn()];
    const { items } = (await get(here, sessionsPath).expect(200)).body;
    // The fourth is that of the test server's own client.
    expect(items).toHaveLength(4);
    expect(items[0]).toEqual({
      id: expect.any(String),
      userAgent: 'Bench browser',
      address: expect.stringContaining('127.0.0.1'),
      beganAt: expect.stringMatching(/^\d{4}-/),
      lastSeenAt: expect.stringMatching(/^\d{4}-/),
      isThis: false,
    });
    expect(items.filter((item: { isThis: boolean }) => item.isThis)).toHaveLength(1);
    const path = `${sessionsPath}/${items[0].id}`;
    await server.anyone.delete(path).set('Cookie', here).expect(204);
    await server.anyone.delete(path).set('Cookie', here).expect(404);
    await get(elsewhere).expect(401);
    await get(there).expect(200);
    await server.anyone.delete(sessionsPath).set('Cookie', here).expect(204);
    await get(there).expect(401);
    await get(here).expect(200);
  });

  it('are not ended, nor seen, by somebody else but an administrator', async () => {
    const cookie = await signIn();
    const [{ id }] = (await get(cookie, sessionsPath)).body.items;
    const reader = await server.as('reader', 'reader');
    await reader.delete(`${sessionsPath}/${id}`).expect(404);
    await reader.get('/api/v1/users/engineer/sessions').expect(403);
    const administrator = await server.as('administrator', 'administrator');
    const listed = await administrator.get('/api/v1/users/engineer/sessions').expect(200);
    expect(listed.body.items.map((item: { id: string }) => item.id)).toContain(id);
    await administrator.delete(`/api/v1/users/engineer/sessions/${id}`).expect(204);
    await get(cookie).expect(401);
    const other = await signIn();
    await administrator.delete('/api/v1/users/engineer/sessions').expect(204);
    await get(other).expect(401);
  });

  it('get a new token at each sign-in, and the one that the browser had ends', async () => {
    const first = await signIn();
    const second = await signIn('engineer', first);
    expect(second).not.toBe(first);
    await get(first).expect(401);
    await get(second).expect(200);
  });

  it('end when nobody has acted for half an hour; what a page asks for by itself is no act', async () => {
    const cookie = await signIn();
    nowMs += 29 * 60_000;
    await get(cookie).expect(200);
    nowMs += 29 * 60_000;
    await get(cookie).set('X-Unattended', 'true').expect(200);
    nowMs += 2 * 60_000;
    await get(cookie).expect(401);
  });

  it('end after twelve hours, however busy', async () => {
    const cookie = await signIn();
    for (let minutes = 0; minutes < 12 * 60 - 20; minutes += 20) {
      nowMs += 20 * 60_000;
      await get(cookie).expect(200);
    }
    nowMs += 20 * 60_000;
    await get(cookie).expect(401);
  });

  it('take an emergency stop even when idle, and stay idle', async () => {
    const cookie = await signIn();
    nowMs += 31 * 60_000;
    await server.anyone.post('/api/v1/rigs/emergency-stop').set('Cookie', cookie).expect(200);
    await get(cookie).expect(401);
  });
});

describe('the password given again', () => {
  let server: TestServer;
  let nowMs: number;
  let officer: Client;
  let firstCookie: string;
  const reset = () => officer.post('/api/v1/rigs/none/reset').send({ reason: 'Clear.' });

  beforeEach(async () => {
    server = await createTestServer();
    await server.as('officer', 'safety-officer');
    nowMs = Date.now();
    jest.spyOn(Date, 'now').mockImplementation(() => nowMs);
    officer = await server.as('other', 'reader');
    const body = { account: 'officer', password: testPassword };
    const answer = await server.anyone.post('/api/v1/auth/sign-in').send(body);
    firstCookie = answer.headers['set-cookie']?.[0]?.split(';')[0] ?? '';
    officer.set('Cookie', firstCookie);
  });
  afterEach(async () => {
    jest.restoreAllMocks();
    await server.close();
  });

  const again = (password: string) => officer.post('/api/v1/auth/reauthenticate').send({ password });
  const keepCookie = (answer: { headers: Record<string, unknown> }) =>
    officer.set('Cookie', (answer.headers['set-cookie'] as string[])[0]?.split(';')[0] ?? '');

  it('is needed to reset, and to approve, even straight after sign-in; not to stop', async () => {
    expect((await reset().expect(403)).body.code).toBe('auth.reauthentication-needed');
    const approve = await officer.post('/api/v1/envelopes/none/approve').send({ reason: 'Checked.' });
    expect(approve.body.code).toBe('auth.reauthentication-needed');
    await officer.post('/api/v1/rigs/emergency-stop').expect(200);
    expect((await again('not the password').expect(401)).body.code).toBe('auth.failed');
    expect((await reset().expect(403)).body.code).toBe('auth.reauthentication-needed');
    keepCookie(await again(testPassword).expect(200));
    expect((await reset().expect(404)).body.code).toBe('rig.not-found');
  });

  it('counts for five minutes, on this session alone', async () => {
    keepCookie(await again(testPassword).expect(200));
    nowMs += 299_000;
    await reset().expect(404);
    nowMs += 2_000;
    await reset().expect(403);
  });

  it('makes a new token; requests that were on their way with the old one still arrive', async () => {
    const renewed = await again(testPassword).expect(200);
    const withFirst = () => server.anyone.get(sessionPath).set('Cookie', firstCookie);
    await withFirst().expect(200);
    nowMs += 11_000;
    await withFirst().expect(401);
    keepCookie(renewed);
    await officer.get(sessionPath).expect(200);
  });
});

describe('one’s own password', () => {
  it('is changed with the old one, and every other session ends', async () => {
    const server = await createTestServer();
    const [here, there] = [await server.as('engineer', 'test-engineer'), await server.as('engineer')];
    const newPassword = 'four ferries in the fog';
    const path = '/api/v1/auth/password';
    await here.post(path).send({ password: 'not the old one', newPassword }).expect(401);
    const weak = await here.post(path).send({ password: testPassword, newPassword: 'short' }).expect(400);
    expect(weak.body.errors[0].field).toBe('newPassword');
    await here.post(path).send({ password: testPassword, newPassword }).expect(204);
    await there.get(sessionPath).expect(401);
    const body = { account: 'engineer', password: newPassword };
    await server.anyone.post('/api/v1/auth/sign-in').send(body).expect(200);
    await server.close();
  });
});
