import { DataSource } from 'typeorm';
import { RigLockoutEntity } from '../../src/rigs/entities/rig-lockout.entity.js';
import { RigStore } from '../../src/rigs/rig-store.js';
import { createTestServer, type Client, type TestServer } from '../server/create-test-server.js';
import { envelopeInput, rigInput } from '../server/documents.js';

describe('rigs', () => {
  let server: TestServer;
  let engineer: Client;
  const fieldsOf = (body: { errors: { field: string }[] }) => body.errors.map((error) => error.field);
  const channels = rigInput().channels;
  const trace = (points: object): (typeof channels)[number] => ({
    ...{ kind: 'trace', id: 'beam', title: 'Beam', unit: 'mV', display: channels[1]!.display },
    ...{ connection: 'memory', address: { name: 'beam', ...points } },
    axis: { title: 'Place', unit: 'mm', from: 0, step: 0.5 },
  });

  beforeEach(async () => {
    server = await createTestServer();
    engineer = await server.as('engineer', 'test-engineer');
  });
  afterEach(() => server.close());

  it('are made, read back with defaults filled in, and started', async () => {
    const made = await engineer.post('/api/v1/rigs').send(rigInput()).expect(201);
    expect(made.headers.location).toBe('/api/v1/rigs/kiln-1');
    expect(made.headers.etag).toBe('"1"');
    expect(server.hosts.reconfigured).toEqual(['kiln-1']);
    const read = await engineer.get('/api/v1/rigs/kiln-1').expect(200);
    expect(read.headers.etag).toBe('"1"');
    expect(read.body).toMatchObject({ id: 'kiln-1', revision: 1, content: rigInput(), status: null });
    expect(read.body.content.description).toBe('');
  });

  it('show the state that their host tells, and are never answered from a cache', async () => {
    await engineer.post('/api/v1/rigs').send(rigInput()).expect(201);
    server.hosts.setPhase('kiln-1', 'running');
    const read = await engineer.get('/api/v1/rigs/kiln-1').set('If-None-Match', '"1"').expect(200);
    expect(read.body.status.phase).toBe('running');
    expect(read.headers['cache-control']).toBe('no-store');
  });

  it('are listed in pages by id', async () => {
    for (const id of ['c', 'a', 'b']) await engineer.post('/api/v1/rigs').send(rigInput({ id })).expect(201);
    const first = await engineer.get('/api/v1/rigs?limit=2').expect(200);
    expect(first.body.items.map((rig: { id: string }) => rig.id)).toEqual(['a', 'b']);
    const second = await engineer.get('/api/v1/rigs').query({ limit: 2, cursor: first.body.nextCursor });
    expect(second.body.items.map((rig: { id: string }) => rig.id)).toEqual(['c']);
    expect(second.body.nextCursor).toBeNull();
    const bad = await engineer.get('/api/v1/rigs?cursor=nonsense').expect(400);
    expect(fieldsOf(bad.body)).toEqual(['cursor']);
    expect(fieldsOf((await engineer.get('/api/v1/rigs?limit=0').expect(400)).body)).toEqual(['limit']);
  });

  it.each([
    ['id', { id: 'Not A Slug' }],
    ['periodMs', { periodMs: 0.5 }],
    ['channels[0].connection', { connections: [{ ...rigInput().connections[0]!, id: 'other' }] }],
    ['connections[0].adapter', { connections: [{ ...rigInput().connections[0]!, adapter: 'telepathy' }] }],
    [
      'connections[0].configuration.store',
      { connections: [{ ...rigInput().connections[0]!, configuration: {} }] },
    ],
    ['channels[4].address.points', { channels: [...channels, trace({})] }],
    ['channels[4].address.points', { channels: [...channels, trace({ points: 5000 })] }],
    [
      'channels[1].address.points',
      { channels: channels.with(1, { ...channels[1]!, address: { name: 'o2', points: 8 } } as never) },
    ],
    [
      'channels[5].expression',
      {
        channels: [
          ...channels,
          trace({ points: 8 }),
          { ...channels[3]!, id: 'sum', expression: '2 * beam' } as never,
        ],
      },
    ],
    ['channels[1].address.name', { channels: [channels[0]!, { ...channels[1]!, address: { name: '' } }] }],
    [
      'channels[3].expression',
      { channels: channels.with(3, { ...channels[3]!, expression: '2 * o3' } as never) },
    ],
    [
      'channels[3].expression',
      { channels: channels.with(3, { ...channels[3]!, expression: '2 *' } as never) },
    ],
  ])('name the field %s where it is at fault, and make nothing', async (field, fault) => {
    const answer = await engineer.post('/api/v1/rigs').send(rigInput(fault)).expect(400);
    expect(answer.body.code).toBe('request.invalid');
    expect(fieldsOf(answer.body)).toContain(field);
    expect(answer.body.errors[0].message.length).toBeGreaterThan(5);
    expect((await engineer.get('/api/v1/rigs')).body.items).toEqual([]);
    expect(server.hosts.reconfigured).toEqual([]);
  });

  it('refuse derived channels that read each other in a circle', async () => {
    const derived = { ...channels[3]!, kind: 'derived' as const };
    const circle = [
      ...channels.slice(0, 3),
      { ...derived, id: 'a', expression: 'b + 1' },
      { ...derived, id: 'b', expression: 'a + 1' },
    ];
    const answer = await engineer
      .post('/api/v1/rigs')
      .send(rigInput({ channels: circle }))
      .expect(400);
    expect(answer.body.errors[0].message).toContain('circle');
  });

  it('have an id of their own that never changes', async () => {
    await engineer.post('/api/v1/rigs').send(rigInput()).expect(201);
    expect((await engineer.post('/api/v1/rigs').send(rigInput()).expect(409)).body.code).toBe('rig.exists');
    const renamed = rigInput({ id: 'kiln-2' });
    const answer = await engineer.put('/api/v1/rigs/kiln-1').set('If-Match', '"1"').send(renamed).expect(400);
    expect(fieldsOf(answer.body)).toEqual(['id']);
  });

  describe('when changed', () => {
    const change = (etag: string | null, overrides: object) => {
      const call = engineer.put('/api/v1/rigs/kiln-1');
      return (etag === null ? call : call.set('If-Match', etag)).send(rigInput(overrides));
    };
    beforeEach(() => engineer.post('/api/v1/rigs').send(rigInput()).expect(201));

    it('take a change on top of the latest revision only', async () => {
      const first = await change('"1"', { title: 'Kiln one' }).expect(200);
      expect(first.headers.etag).toBe('"2"');
      const late = await change('"1"', { title: 'Overwritten' }).expect(409);
      expect(late.body.code).toBe('request.precondition');
      expect((await engineer.get('/api/v1/rigs/kiln-1')).body.content.title).toBe('Kiln one');
      expect(server.hosts.reconfigured).toEqual(['kiln-1', 'kiln-1']);
    });

    it('lets one of many changes of the same revision through', async () => {
      const answers = await Promise.all(['a', 'b', 'c'].map((title) => change('"1"', { title })));
      expect(answers.map((answer) => answer.status).sort()).toEqual([200, 409, 409]);
    });

    it.each([null, 'W/"1"', '1', '*'])('asks for a revision: If-Match %s is none', async (etag) => {
      expect(fieldsOf((await change(etag, {}).expect(400)).body)).toEqual(['If-Match']);
    });

    it.each(['armed', 'running', 'stopping'] as const)('refuses while the rig is %s', async (phase) => {
      server.hosts.setPhase('kiln-1', phase);
      const answer = await change('"1"', { title: 'Not now' }).expect(409);
      expect(answer.body.code).toBe('rig.busy');
      expect((await engineer.get('/api/v1/rigs/kiln-1')).body.revision).toBe(1);
    });

    it.each(['idle', 'offline', 'tripped'] as const)('is possible while the rig is %s', async (phase) => {
      server.hosts.setPhase('kiln-1', phase);
      await change('"1"', { title: 'Now' }).expect(200);
    });

    it('withdraws the approval when a channel comes to mean something else, and only then', async () => {
      const officer = await server.as('officer', 'safety-officer');
      const draft = await engineer.post('/api/v1/rigs/kiln-1/envelopes').send({ content: envelopeInput() });
      const envelope = `/api/v1/envelopes/${draft.body.id}`;
      await engineer.post(`${envelope}/submit`).expect(200);
      await officer.post(`${envelope}/approve`).send({ reason: 'checked' }).expect(200);

      await change('"1"', { title: 'Another title' }).expect(200);
      expect((await engineer.get(envelope)).body.status).toBe('in-force');
      const rewired = channels.with(0, { ...channels[0]!, address: { name: 'other' } } as never);
      await change('"2"', { channels: rewired }).expect(200);
      expect((await engineer.get(envelope)).body.status).toBe('superseded');
    });
  });

  it('take a trace whose address has points, and measures of it', async () => {
    const peak = { ...channels[3]!, id: 'peak', expression: 'peakAt(beam)', unit: 'mm' } as never;
    const traced = rigInput({ channels: [...channels, trace({ points: 512 }), peak] });
    await engineer.post('/api/v1/rigs').send(traced).expect(201);
  });

  it('keep a trip and a lockout apart from each other, on disk', async () => {
    await engineer.post('/api/v1/rigs').send(rigInput()).expect(201);
    const store = server.app.get(RigStore, { strict: false });
    const at = '2026-01-01T00:00:00.000Z';
    const trip = { cause: 'emergency-stop', message: 'Pressed.', at, by: 'technician', later: [] };
    const lockout = { id: 'one', rigId: 'kiln-1', by: 'officer', reason: 'Work.', at, mayLift: [] };
    await store.saveTrip('kiln-1', trip);
    await server.app.get(DataSource).getRepository(RigLockoutEntity).insert(lockout);
    expect(await store.state('kiln-1')).toEqual({ trip, isLockedOut: true });
    await store.saveTrip('kiln-1', null);
    expect(await store.state('kiln-1')).toEqual({ trip: null, isLockedOut: true });
    expect(await store.state('never-seen')).toEqual({ trip: null, isLockedOut: false });
  });

  it('say which adapters can be used, and what they must be told', async () => {
    const { body } = await engineer.get('/api/v1/adapters').expect(200);
    const ids = body.items.map((adapter: { id: string }) => adapter.id);
    expect(ids).toEqual(expect.arrayContaining(['modbus-tcp', 'in-memory']));
    const modbus = body.items.find((adapter: { id: string }) => adapter.id === 'modbus-tcp');
    expect(modbus.configurationSchema.properties.host).toBeDefined();
  });
});
