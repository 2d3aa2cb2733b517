import { DomainError } from '@cresthold/shared';
import { DataSource } from 'typeorm';
import { createTestServer, type Client, type TestServer } from '../server/create-test-server.js';
import { envelopeInput, limitInput, rigInput } from '../server/documents.js';

describe('envelopes', () => {
  let server: TestServer;
  let engineer: Client;
  let officer: Client;
  const envelopes = '/api/v1/rigs/kiln-1/envelopes';
  const at = (id: string, act = '') => `/api/v1/envelopes/${id}${act === '' ? '' : `/${act}`}`;

  const draft = async (by = engineer, content: object = envelopeInput()): Promise<string> =>
    (await by.post(envelopes).send({ content }).expect(201)).body.id;
  const submitted = async (): Promise<string> => {
    const id = await draft();
    await engineer.post(at(id, 'submit')).expect(200);
    return id;
  };
  const statusOf = async (id: string): Promise<string> => (await engineer.get(at(id))).body.status;
  const decide = (id: string, act: 'approve' | 'return', by = officer) =>
    by.post(at(id, act)).send({ reason: 'Checked on the rig.' });

  beforeEach(async () => {
    server = await createTestServer();
    engineer = await server.as('engineer', 'test-engineer');
    officer = await server.as('officer', 'safety-officer');
    await engineer.post('/api/v1/rigs').send(rigInput()).expect(201);
    server.hosts.setPhase('kiln-1', 'idle');
  });
  afterEach(() => server.close());

  it('go from draft over submission into force, and the host is told', async () => {
    const id = await submitted();
    const approved = await decide(id, 'approve').expect(200);
    expect(approved.body).toMatchObject({
      version: 1,
      status: 'in-force',
      author: 'engineer',
      submittedBy: 'engineer',
      decidedBy: 'officer',
      reason: 'Checked on the rig.',
    });
    const { content } = approved.body;
    expect(server.hosts.commands).toEqual([
      { rigId: 'kiln-1', command: { type: 'set-envelope', envelope: { id, version: 1, content } } },
    ]);
  });

  it('supersede the one before, and are listed newest first', async () => {
    const first = await submitted();
    await decide(first, 'approve').expect(200);
    const second = await submitted();
    await decide(second, 'approve').expect(200);
    const { body } = await engineer.get(envelopes).expect(200);
    expect(body.items.map((e: { version: number; status: string }) => [e.version, e.status])).toEqual([
      [2, 'in-force'],
      [1, 'superseded'],
    ]);
  });

  it.each(['approve', 'return'] as const)('are never decided by their author: %s', async (act) => {
    const id = await draft(officer);
    await officer.post(at(id, 'submit')).expect(200);
    const answer = await decide(id, act).expect(403);
    expect(answer.body.code).toBe('envelope.own-draft');
    expect(await statusOf(id)).toBe('submitted');
    expect(server.hosts.commands).toEqual([]);
    const second = await server.as('second-officer', 'safety-officer');
    await decide(id, act, second).expect(200);
  });

  it('are never decided by an author who has the role as well', async () => {
    const both = await server.as('both', 'test-engineer', 'safety-officer');
    const id = await draft(both);
    await both.post(at(id, 'submit')).expect(200);
    expect((await decide(id, 'approve', both).expect(403)).body.code).toBe('envelope.own-draft');
  });

  it('are changed and submitted by their author alone', async () => {
    const other = await server.as('other', 'test-engineer');
    const id = await draft();
    const content = envelopeInput({ overrunLimit: 5 });
    const answer = await other.put(at(id)).set('If-Match', '"1"').send({ content }).expect(403);
    expect(answer.body.code).toBe('auth.forbidden');
    await other.post(at(id, 'submit')).expect(403);
    expect(await statusOf(id)).toBe('draft');
  });

  it('go back to their author, are mended and come again', async () => {
    const id = await submitted();
    await decide(id, 'return').expect(200);
    expect(await statusOf(id)).toBe('returned');
    const content = envelopeInput({ overrunLimit: 5 });
    const changed = await engineer.put(at(id)).set('If-Match', '"1"').send({ content }).expect(200);
    expect(changed.body).toMatchObject({ status: 'draft', revision: 2, content: { overrunLimit: 5 } });
    await engineer.post(at(id, 'submit')).expect(200);
    await decide(id, 'approve').expect(200);
  });

  it('are approved as they were read: a newer revision is refused', async () => {
    const id = await submitted();
    await decide(id, 'return').expect(200);
    const content = envelopeInput({ limits: [limitInput({ max: 90 })] });
    await engineer.put(at(id)).set('If-Match', '"1"').send({ content }).expect(200);
    await engineer.post(at(id, 'submit')).expect(200);
    const answer = await decide(id, 'approve').set('If-Match', '"1"').expect(409);
    expect(answer.body.code).toBe('request.precondition');
    await decide(id, 'approve').set('If-Match', '"2"').expect(200);
  });

  it('never change once submitted or decided', async () => {
    const id = await submitted();
    const change = () => engineer.put(at(id)).set('If-Match', '"1"').send({ content: envelopeInput() });
    expect((await change().expect(409)).body.code).toBe('envelope.wrong-status');
    await decide(id, 'approve').expect(200);
    expect((await change().expect(409)).body.code).toBe('envelope.wrong-status');
    expect((await decide(id, 'approve').expect(409)).body.code).toBe('envelope.wrong-status');
    expect((await decide(id, 'return').expect(409)).body.code).toBe('envelope.wrong-status');
  });

  it.each(['armed', 'running', 'stopping'] as const)(
    'are not approved while the rig is %s',
    async (phase) => {
      const id = await submitted();
      server.hosts.setPhase('kiln-1', phase);
      expect((await decide(id, 'approve').expect(409)).body.code).toBe('rig.busy');
      expect(await statusOf(id)).toBe('submitted');
    },
  );

  it('stay as they were when the host refuses the new one', async () => {
    const first = await submitted();
    await decide(first, 'approve').expect(200);
    const second = await submitted();
    server.hosts.refusal = new DomainError('rig.illegal-move');
    expect((await decide(second, 'approve').expect(409)).body.code).toBe('rig.illegal-move');
    expect([await statusOf(first), await statusOf(second)]).toEqual(['in-force', 'submitted']);
    expect((await engineer.get(at(second))).body).toMatchObject({ decidedBy: null, reason: null });
    server.hosts.refusal = null;
    await decide(second, 'approve').expect(200);
    expect([await statusOf(first), await statusOf(second)]).toEqual(['superseded', 'in-force']);
  });

  it('leave exactly one in force when two are approved at once', async () => {
    const ids = [await submitted(), await submitted()];
    await Promise.all(ids.map((id) => decide(id, 'approve').expect(200)));
    const inForce = (await Promise.all(ids.map(statusOf))).filter((status) => status === 'in-force');
    expect(inForce).toHaveLength(1);
  });

  it.each([
    ['content.limits', { limits: [] }],
    ['content.limits[0].min', { limits: [limitInput({ min: 60, max: 60 })] }],
    ['content.limits[0].min', { limits: [limitInput({ min: 70, rest: 65 })] }],
    ['content.limits[0].rest', { limits: [limitInput({ rest: 5 })] }],
    ['content.limits[0].channel', { limits: [limitInput({ channel: 'o2' })] }],
    ['content.limits[0].channel', { limits: [limitInput({ channel: 'nowhere' })] }],
    ['content.limits[1].channel', { limits: [limitInput(), limitInput()] }],
    ['content.limits[0].slewPerS', { limits: [limitInput({ slewPerS: 0 })] }],
    ['content.heartbeat.channel', { heartbeat: { channel: 'co', periodS: 1 } }],
    ['content.staleness[0].channel', { staleness: [{ channel: 'ghost', afterS: 1 }] }],
    ['content.interlocks[0].condition', { interlocks: [interlock('carbon > 400')] }],
    ['content.interlocks[0].condition', { interlocks: [interlock('co >')] }],
    ['content.interlocks[0].condition', { interlocks: [interlock('co + 1')] }],
  ])('name the field %s where it is at fault, and change nothing', async (field, fault) => {
    const content = envelopeInput(fault);
    const answer = await engineer.post(envelopes).send({ content }).expect(400);
    expect(answer.body.code).toBe('request.invalid');
    expect(answer.body.errors.map((error: { field: string }) => error.field)).toContain(field);
    expect((await engineer.get(envelopes)).body.items).toEqual([]);
  });

  it('need a reason for every decision', async () => {
    const id = await submitted();
    const answer = await officer.post(at(id, 'approve')).send({ reason: '  ' }).expect(400);
    expect(answer.body.errors[0].field).toBe('reason');
    expect(await statusOf(id)).toBe('submitted');
  });

  it('are judged again at submission and approval, against the rig as it is then', async () => {
    const id = await draft();
    const channels = rigInput().channels.filter((channel) => channel.id !== 'co');
    await engineer.put('/api/v1/rigs/kiln-1').set('If-Match', '"1"').send(rigInput({ channels })).expect(200);
    const answer = await engineer.post(at(id, 'submit')).expect(400);
    expect(answer.body.errors[0].field).toBe('content.interlocks[0].condition');
  });

  it('leave a trace of who did what and why, which the database will not let anybody change', async () => {
    const id = await submitted();
    await decide(id, 'approve').expect(200);
    const database = server.app.get(DataSource);
    const rows: { account: string; action: string; reason: string | null }[] = await database.query(
      `SELECT account, action, reason FROM audit WHERE subject = ? ORDER BY id`,
      [id],
    );
    expect(rows).toEqual([
      { account: 'engineer', action: 'envelope.drafted', reason: null },
      { account: 'engineer', action: 'envelope.submitted', reason: null },
      { account: 'officer', action: 'envelope.approved', reason: 'Checked on the rig.' },
    ]);
    await expect(database.query(`UPDATE audit SET account = 'nobody'`)).rejects.toThrow('append-only');
    await expect(database.query(`DELETE FROM audit`)).rejects.toThrow('append-only');
  });

  it('belong to a rig that exists', async () => {
    const answer = await engineer.post('/api/v1/rigs/nowhere/envelopes').send({ content: envelopeInput() });
    expect([answer.status, answer.body.code]).toEqual([404, 'rig.not-found']);
    expect((await engineer.get(at('none')).expect(404)).body.code).toBe('envelope.not-found');
  });
});

function interlock(condition: string) {
  return { ...envelopeInput().interlocks[0]!, condition };
}
