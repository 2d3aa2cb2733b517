import { createTestServer, type Client, type TestServer } from '../server/create-test-server.js';
import { rigInput } from '../server/documents.js';

describe('the scan budget of a draft', () => {
  let server: TestServer;
  let engineer: Client;
  beforeAll(async () => {
    server = await createTestServer();
    engineer = await server.as('engineer', 'test-engineer');
  });
  afterAll(() => server.close());

  const display = { min: 0, max: 100, decimals: 1 };
  const budget = async (draft: object) =>
    (await engineer.post('/api/v1/rigs/scan-budget').send(draft).expect(200)).body;
  const line = {
    id: 'line',
    title: 'Line',
    adapter: 'modbus-rtu',
    configuration: { path: '/dev/ttyUSB0', baudRate: 9600, parity: 'even', stopBits: 1 },
  };
  const register = (id: string, address: number) => ({
    kind: 'sensor',
    ...{ id, title: id, unit: '', display, connection: 'line' },
    address: { table: 'holding-register', address, type: 'u16' },
  });
  const serialRig = (change: object = {}) =>
    rigInput({ connections: [line], channels: [register('a', 0), register('b', 1)] as never, ...change });

  it('counts the requests of each connection, and saves nothing', async () => {
    expect(await budget(rigInput())).toEqual({
      faults: [],
      connections: [{ id: 'memory', channels: 3, leftOut: 0, requests: 1, wireS: 0, note: null }],
      requests: 1,
      wireS: 0,
      periodMs: 50,
      shareOfPeriod: 0,
    });
    expect((await engineer.get('/api/v1/rigs')).body.items).toEqual([]);
  });

  it('says how much of the period a serial line takes', async () => {
    const found = await budget(serialRig());
    expect(found.faults).toEqual([]);
    expect(found.requests).toBe(1);
    // MODBUS over serial line V1.02: 11 bits a character; 8 of the request, 9 of the answer with two registers, and
    // twice 3.5 characters of silence.
    const framesS = ((8 + 9) * 11) / 9600;
    expect(found.wireS).toBeGreaterThanOrEqual(framesS);
    expect(found.wireS).toBeLessThan(framesS + (2 * 3.5 * 11 + 2 * 11) / 9600);
    expect(found.shareOfPeriod).toBeCloseTo(found.wireS / 0.05, 6);
  });

  it('takes the slowest of connections that are read side by side, and adds up their requests', async () => {
    const both = serialRig({
      connections: [
        line,
        { ...line, id: 'other', configuration: { ...line.configuration, path: '/dev/ttyUSB1' } },
      ],
      channels: [
        register('a', 0),
        { ...register('b', 0), connection: 'other' },
        { ...register('c', 900), connection: 'other' },
      ] as never,
    });
    const found = await budget(both);
    expect(found.connections.map(({ requests }: { requests: number }) => requests)).toEqual([1, 2]);
    expect(found.requests).toBe(3);
    expect(found.wireS).toBe(found.connections[1].wireS);
  });

  it.each([
    [
      'an address at fault',
      { channels: [register('a', 0), register('b', 70_000)] },
      'channels[1].address.address',
      1,
    ],
    [
      'a configuration at fault',
      { connections: [{ ...line, configuration: {} }] },
      'connections[0].configuration.path',
      null,
    ],
    [
      'an adapter that is not there',
      { connections: [{ ...line, adapter: 'telepathy' }] },
      'connections[0].adapter',
      null,
    ],
    ['a title that is missing', { title: '' }, 'title', 1],
    [
      'an expression that does not compile',
      {
        channels: [
          register('a', 0),
          { kind: 'derived', id: 'd', title: 'D', unit: '', display, expression: '2 *' },
        ],
      },
      'channels[1].expression',
      1,
    ],
  ])('names %s at its field and counts the rest', async (_name, change, field, requests) => {
    const found = await budget(serialRig(change));
    expect(found.faults.map((fault: { field: string }) => fault.field)).toContain(field);
    expect(found.connections[0].requests).toBe(requests);
    if (requests === null) expect(found.connections[0].note.length).toBeGreaterThan(10);
  });

  it('gives the faults that making the rig would be refused with', async () => {
    const draft = serialRig({ channels: [register('a', 0), register('a', 70_000)] as never, title: '' });
    const refused = await engineer.post('/api/v1/rigs').send(draft).expect(400);
    const { faults } = await budget(draft);
    expect(faults).toEqual(expect.arrayContaining(refused.body.errors));
  });

  it.each([{}, { connections: 'x', channels: [null, 3] }, { connections: [null] }])(
    'has an answer for %j, which is hardly a rig',
    async (draft) => {
      const found = await budget(draft);
      expect(found.faults.length).toBeGreaterThan(0);
      expect(found.shareOfPeriod).toBeNull();
    },
  );
});
