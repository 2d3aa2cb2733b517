import type { TestServer } from '../server/create-test-server.js';
import { createScriptedServer, makeRig, rigId, statusOf } from '../rig-hosts/scripted-server.js';

const path = `/api/v1/rigs/${rigId}/lockouts`;
let server: TestServer;

const reason = 'Hands in the kiln.';
const done = { reason: 'The work is done.' };

beforeEach(async () => {
  server = await createScriptedServer();
  await makeRig(server);
});
afterEach(() => server.close());

describe('a lockout', () => {
  it('is one of several: the rig is free only when all are lifted', async () => {
    const technician = await server.as('technician', 'technician');
    const engineer = await server.as('engineer', 'test-engineer');
    const { body: first } = await technician.post(path).send({ reason }).expect(201);
    expect(first).toMatchObject({ rigId, by: 'technician', reason, mayLift: [] });
    const again = await technician.post(path).send({ reason }).expect(409);
    expect(again.body.code).toBe('lockout.exists');
    const { body: second } = await engineer.post(path).send({ reason: 'Rewiring.' }).expect(201);
    const { body: listed } = await engineer.get(path).expect(200);
    expect(listed.map(({ by }: { by: string }) => by)).toEqual(['technician', 'engineer']);
    const { body: left } = await technician.post(`${path}/${first.id}/lift`).send(done).expect(200);
    expect(left).toMatchObject([{ id: second.id }]);
    expect(await statusOf(server)).toMatchObject({ isLockedOut: true });
    await engineer.post(`${path}/${second.id}/lift`).send(done).expect(200);
    expect(await statusOf(server)).toMatchObject({ isLockedOut: false });
    await engineer.post(`${path}/${second.id}/lift`).send(done).expect(404);
  });

  it('is lifted by its person or by those named, and by nobody else', async () => {
    const technician = await server.as('technician', 'technician');
    const officer = await server.as('officer', 'safety-officer');
    const other = await server.as('deputy', 'safety-officer');
    const named = { reason, mayLift: ['officer'] };
    const { body: lockout } = await technician.post(path).send(named).expect(201);
    const lift = `${path}/${lockout.id}/lift`;
    const refused = await other.post(lift).send(done).expect(403);
    expect(refused.body).toMatchObject({ code: 'lockout.not-yours' });
    expect(refused.body.detail).toContain('technician');
    const engineer = await server.as('engineer', 'test-engineer');
    await engineer.post(lift).send(done).expect(403);
    await officer.post(lift).send({}).expect(400);
    await officer.post(lift).send(done).expect(200);
    const administrator = await server.as('administrator', 'administrator');
    const { body } = await administrator.get('/api/v1/audit').query({ rigId }).expect(200);
    const acts = body.items.map(({ action, account, subject }: Record<string, string>) =>
      [action, account, subject].join(' '),
    );
    expect(acts).toEqual(
      expect.arrayContaining([
        'rig.lockout-lifted officer technician',
        'rig.locked-out technician technician',
      ]),
    );
  });

  it('names none but safety officers and administrators', async () => {
    await server.as('engineer', 'test-engineer');
    const technician = await server.as('technician', 'technician');
    const answer = await technician
      .post(path)
      .send({ reason, mayLift: ['engineer'] })
      .expect(400);
    expect(answer.body.errors).toMatchObject([{ field: 'mayLift[0]' }]);
    await technician.post(path).send({ reason: ' ' }).expect(400);
    expect((await technician.get(path).expect(200)).body).toEqual([]);
  });

  it('where nobody is named, is lifted by any safety officer, but by no other technician', async () => {
    const technician = await server.as('technician', 'technician');
    const { body: lockout } = await technician.post(path).send({ reason }).expect(201);
    const colleague = await server.as('colleague', 'technician');
    await colleague.post(`${path}/${lockout.id}/lift`).send(done).expect(403);
    const officer = await server.as('officer', 'safety-officer');
    await officer.post(`${path}/${lockout.id}/lift`).send(done).expect(200);
  });
});
