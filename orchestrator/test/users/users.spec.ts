import {
  createTestServer,
  type Client,
  testPassword,
  type TestServer,
} from '../server/create-test-server.js';

describe('accounts', () => {
  let server: TestServer;
  let administrator: Client;
  const technician = {
    account: 'technician',
    title: 'Technician',
    roles: ['technician'],
    password: testPassword,
  };

  beforeEach(async () => {
    server = await createTestServer();
    administrator = await server.as('administrator', 'administrator');
  });
  afterEach(() => server.close());

  it('are made, listed in pages and never show a hash', async () => {
    const made = await administrator.post('/api/v1/users').send(technician).expect(201);
    expect(made.headers.location).toBe('/api/v1/users/technician');
    expect(made.body).toEqual({
      account: 'technician',
      title: 'Technician',
      roles: ['technician'],
      rigLimits: [],
      isEnabled: true,
      createdAt: expect.stringMatching(/^\d{4}-\d\d-\d\dT/),
    });
    const first = await administrator.get('/api/v1/users?limit=1').expect(200);
    expect(first.body.items.map((user: { account: string }) => user.account)).toEqual(['administrator']);
    const next = await administrator.get(`/api/v1/users?limit=1&cursor=${first.body.nextCursor}`);
    expect(next.body.items.map((user: { account: string }) => user.account)).toEqual(['technician']);
    expect(next.body.nextCursor).toBeNull();
  });

  it('have a name of their own', async () => {
    await administrator.post('/api/v1/users').send(technician).expect(201);
    const again = await administrator.post('/api/v1/users').send(technician).expect(409);
    expect([again.body.code, again.body.errors[0].field]).toEqual(['user.exists', 'account']);
  });

  it.each([
    ['short', 'fourteen chars'],
    ['long', 'quite long '.repeat(24)],
    ['common with digits put to it', 'Password1234567'],
    ['one character over and over', 'zzzzzzzzzzzzzzzz'],
    ['built from the account', 'technician-2026-12'],
  ])('refuse a password that is %s', async (_, password) => {
    const answer = await administrator
      .post('/api/v1/users')
      .send({ ...technician, password })
      .expect(400);
    expect([answer.body.code, answer.body.errors[0].field]).toEqual(['user.weak-password', 'password']);
  });

  it.each([
    ['account', { account: 'no spaces please' }],
    ['roles', { roles: [] }],
    ['roles[0]', { roles: ['king'] }],
    ['title', { title: ' ' }],
  ])('name the field %s where it is at fault', async (field, fault) => {
    const answer = await administrator
      .post('/api/v1/users')
      .send({ ...technician, ...fault })
      .expect(400);
    expect(answer.body.errors.map((error: { field: string }) => error.field)).toContain(field);
  });

  it('lose every session with a new password, or when disabled', async () => {
    const before = await server.as('technician', 'technician');
    await before.get('/api/v1/auth/session').expect(200);
    await administrator.patch('/api/v1/users/technician').send({ password: 'another long one' }).expect(200);
    await before.get('/api/v1/auth/session').expect(401);
    const signIn = { account: 'technician', password: 'another long one' };
    const after = await server.anyone.post('/api/v1/auth/sign-in').send(signIn).expect(200);
    const cookie = after.headers['set-cookie']?.[0]?.split(';')[0] ?? '';
    await administrator.patch('/api/v1/users/technician').send({ isEnabled: false }).expect(200);
    await server.anyone.get('/api/v1/auth/session').set('Cookie', cookie).expect(401);
    await administrator.patch('/api/v1/users/technician').send({ isEnabled: true }).expect(200);
    await server.anyone.get('/api/v1/auth/session').set('Cookie', cookie).expect(401);
  });

  it('take a role away at once, in sessions that are open', async () => {
    const second = await server.as('second', 'administrator');
    await administrator
      .patch('/api/v1/users/second')
      .send({ roles: ['reader'] })
      .expect(200);
    await second.get('/api/v1/users').expect(403);
  });

  it.each([{ isEnabled: false }, { roles: ['reader'] }])(
    'keep the last administrator: %j changes nothing',
    async (change) => {
      const answer = await administrator.patch('/api/v1/users/administrator').send(change).expect(409);
      expect(answer.body.code).toBe('user.last-administrator');
      await administrator.get('/api/v1/users').expect(200);
    },
  );

  it('are not found under another name', async () => {
    const answer = await administrator.patch('/api/v1/users/nobody').send({ title: 'Nobody' }).expect(404);
    expect(answer.body.code).toBe('user.not-found');
  });
});
