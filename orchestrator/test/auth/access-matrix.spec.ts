import { roles } from '@cresthold/shared';
import { createTestServer, type TestServer } from '../server/create-test-server.js';
import { expectedCell, Matrix, MatrixStation, routesOf, type MatrixRoute } from './access-matrix.js';

// What a lockout itself forbids is judged by the rig's state machine and shown there; here it must open nothing.
describe('every route for every role on every rig', () => {
  let server: TestServer;
  let station: MatrixStation;
  let matrix: Matrix;

  beforeAll(async () => {
    server = await createTestServer();
    // One port for all of the requests.
    await server.app.listen(0, '127.0.0.1');
    station = await MatrixStation.make(server);
    matrix = new Matrix(routesOf(server));
  }, 30_000);
  afterAll(() => server.close());

  it.each(roles)(
    'lets the role %s in where it may, and nowhere else',
    async (role) => {
      await station.walk(matrix, role, ['own', 'foreign']);
      expect(matrix.unexpected).toEqual([]);
    },
    60_000,
  );

  it('lets nobody in unseen but to sign in, to set up and to ask for its health', async () => {
    await station.walk(matrix, null, ['own']);
    expect(matrix.unexpected).toEqual([]);
    const open = matrix.routes.filter((route) => matrix.cell(route, null, 'own') === '+');
    expect(open.map(({ name }) => name).sort()).toEqual([
      'GET /health',
      'GET /setup',
      'POST /auth/sign-in',
      'POST /setup',
    ]);
  }, 20_000);

  it('notices a route that is open to one role too many, so that the check can fail', () => {
    const route = matrix.routes.find(({ name }) => name === 'POST /rigs/{rigId}/reset');
    if (route === undefined) throw new Error('The route is gone.');
    const loosened: MatrixRoute = { ...route, access: [...route.access, 'reader'] };
    expect(expectedCell(loosened, 'reader', 'own')).not.toBe(matrix.cell(route, 'reader', 'own'));
    expect(expectedCell({ ...route, isOfRig: false }, 'safety-officer', 'foreign')).not.toBe(
      matrix.cell(route, 'safety-officer', 'foreign'),
    );
  });

  it.each(['rigs', 'objectives', 'experiments', 'runs'])(
    'shows no foreign rig in the list of %s',
    async (list) => {
      const reader = await station.as('reader');
      const { body } = await reader.get(`/api/v1/${list}`).expect(200);
      const rigIds = (body.items as { id: string; rigId?: string }[]).map(({ id, rigId }) => rigId ?? id);
      expect(rigIds.sort()).toEqual(['locked', 'own']);
      if (list === 'rigs') return;
      const foreign = await reader.get(`/api/v1/${list}?rigId=foreign`).expect(403);
      expect(foreign.body.code).toBe('auth.foreign-rig');
    },
  );

  it('shows a safety officer the audit of the rigs that he reaches alone', async () => {
    const officer = await station.as('safety-officer');
    const { body } = await officer.get('/api/v1/audit?limit=200').expect(200);
    const rigIds = new Set((body.items as { rigId: string | null }[]).map(({ rigId }) => rigId));
    expect([...rigIds].sort()).toEqual(['locked', 'own']);
    const csv = await officer.get('/api/v1/audit/export').expect(200);
    expect(csv.text).not.toContain('foreign');
  });

  it('keeps an administrator from limiting himself, so that somebody reaches everything', async () => {
    const administrator = await station.as('administrator');
    const answer = await administrator
      .patch('/api/v1/users/the-administrator')
      .send({ rigLimits: [{ role: 'administrator', rigs: ['own'] }] })
      .expect(400);
    expect(answer.body.errors[0].field).toBe('rigLimits[0].role');
  });

  it('judges the rights of each role by themselves', async () => {
    await server.as('both', 'reader', 'technician');
    const administrator = await station.as('administrator');
    const rigLimits = [{ role: 'technician', rigs: ['own'] }];
    await administrator.patch('/api/v1/users/both').send({ rigLimits }).expect(200);
    const both = await server.as('both');
    await both.get('/api/v1/rigs/foreign').expect(200);
    // No host runs here, so what is let in gets no further.
    expect((await both.post('/api/v1/rigs/own/arm')).body.code).toBe('host.unavailable');
    const arm = await both.post('/api/v1/rigs/foreign/arm').expect(403);
    expect(arm.body.code).toBe('auth.foreign-rig');
  });
});
