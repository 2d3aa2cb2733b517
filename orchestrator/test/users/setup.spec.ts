import { SetupService } from '../../src/setup/setup.service.js';
import { createTestServer, type TestServer } from '../server/create-test-server.js';

describe('the first start', () => {
  let server: TestServer;
  const person = { account: 'administrator', title: 'Administrator', password: 'a long enough one' };
  const setUp = (body: object) => server.anyone.post('/api/v1/setup').send(body);

  beforeEach(async () => {
    server = await createTestServer();
  });
  afterEach(() => server.close());

  it('makes the first administrator with the printed code, once', async () => {
    const code = (await server.app.get(SetupService).currentCode()) ?? '';
    expect(code).toMatch(/^([A-Z2-9]{5}-){3}[A-Z2-9]{5}$/);
    expect((await server.anyone.get('/api/v1/setup')).body).toEqual({ isNeeded: true });
    const made = await setUp({ ...person, code: code.toLowerCase() }).expect(201);
    expect(made.body).toMatchObject({ account: 'administrator', roles: ['administrator'] });
    expect((await server.anyone.get('/api/v1/setup')).body).toEqual({ isNeeded: false });
    expect(await server.app.get(SetupService).currentCode()).toBeNull();
    const again = await setUp({ ...person, account: 'other', code }).expect(409);
    expect(again.body.code).toBe('auth.setup-done');
    const { account, password } = person;
    await server.anyone.post('/api/v1/auth/sign-in').send({ account, password }).expect(200);
  });

  it('refuses a wrong code and slows guesses down', async () => {
    const answer = await setUp({ ...person, code: 'AAAAA-AAAAA-AAAAA-AAAAA' }).expect(403);
    expect(answer.body.code).toBe('auth.setup-code');
    expect(answer.body.errors[0].field).toBe('code');
    for (let i = 0; i < 4; i += 1) await setUp({ ...person, code: `guess ${i}` }).expect(403);
    await setUp({ ...person, code: 'one more' }).expect(429);
    expect((await server.anyone.get('/api/v1/setup')).body.isNeeded).toBe(true);
  });

  it('makes exactly one of two administrators that are asked for at once', async () => {
    const code = await server.app.get(SetupService).currentCode();
    const answers = await Promise.all([
      setUp({ ...person, code }),
      setUp({ ...person, account: 'other', code }),
    ]);
    expect(answers.map((answer) => answer.status).sort()).toEqual([201, 409]);
  });
});
