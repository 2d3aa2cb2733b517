import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { ApiClient, type Body } from '../harness/api-client.js';
import { ServerProcess } from '../harness/server-process.js';
import { password } from '../harness/station.js';
import { until } from '../harness/until.js';
import { writeGuideFiles } from './guide-files.js';
import { describeInjectedFaults } from './injected-faults.js';
import { startTextDevice, type TextDevice } from './text-device.js';

/** Broken in a different way each: what they are, and the reason that is told. */
const broken = {
  throws: ['throw new Error("no licence found");', 'plug-in.not-loaded'],
  exportsNothing: ['export const other = 1;', 'plug-in.malformed'],
  wrongRange: [
    "import good from '../good/adapter.js'; export default { ...good, manifest: { ...good.manifest, id: 'future', contract: '^7.0.0' } };",
    'plug-in.other-contract',
  ],
  sameId: ["export { default } from '../good/adapter.js';", 'plug-in.duplicate'],
  shippedId: [
    "import good from '../good/adapter.js'; export default { ...good, manifest: { ...good.manifest, id: 'modbus-tcp' } };",
    'plug-in.duplicate',
  ],
} as const;

const folder = mkdtempSync(join(tmpdir(), 'cresthold-plug-ins-'));
let server: ServerProcess;
let client: ApiClient;
let device: TextDevice;

beforeAll(async () => {
  writeGuideFiles(join(folder, 'good'));
  for (const [name, [source]] of Object.entries(broken)) {
    mkdirSync(join(folder, name));
    writeFileSync(join(folder, name, 'package.json'), '{"type":"module","exports":"./index.js"}');
    writeFileSync(join(folder, name, 'index.js'), source);
  }
  device = await startTextDevice();
  const names = ['throws', 'good', ...Object.keys(broken).filter((name) => name !== 'throws'), 'not-there'];
  const plugIns = names.map((name) => join(folder, name)).join(', ');
  server = await ServerProcess.start(join(folder, 'data'), { CRESTHOLD_PLUGINS: plugIns });
  const code = await server.setUpCode();
  const first = { code, account: 'administrator', title: 'Administrator', password };
  await new ApiClient(server.url).expect(201, 'POST', 'setup', first);
  client = await ApiClient.signIn(server.url, 'administrator', password);
}, 60_000);

afterAll(async () => {
  await server.end();
  await device.close();
  rmSync(folder, { recursive: true });
});

const listing = async (): Promise<Body[]> => (await client.get('adapters')).items as Body[];
const named = (items: Body[], name: string): Body =>
  items.find(({ reference }) => reference === join(folder, name));

it('lists a plug-in beside the shipped adapters, with the forms of its schemas', async () => {
  const items = await listing();
  expect(items.filter(({ origin, state }) => origin === 'shipped' && state !== 'ready')).toEqual([]);
  expect(named(items, 'good')).toMatchObject({
    id: 'bath',
    title: 'Bath (text over TCP)',
    version: '0.1.0',
    contract: '^1.0.0',
    origin: 'plug-in',
    state: 'ready',
    error: null,
    configurationSchema: {
      required: ['host'],
      properties: { port: { title: 'Port', default: 4100, minimum: 1, maximum: 65_535 } },
    },
    addressSchema: { properties: { name: { description: 'As in the manual, e.g. temp.' } } },
  });
});

it('lists each broken plug-in with its reason, logs it, and starts all the same', async () => {
  const items = await listing();
  for (const [name, [, code]] of Object.entries(broken)) {
    expect([name, named(items, name)]).toMatchObject([name, { state: 'broken', error: { code } }]);
    expect(server.output.text).toContain(`Plug-in ${join(folder, name)} is broken`);
  }
  expect(named(items, 'not-there')).toMatchObject({ state: 'broken', error: { code: 'plug-in.not-found' } });
  expect(named(items, 'throws').error.message).toContain('no licence found');
});

const display = { min: 0, max: 100, decimals: 1 };
const channel = (kind: string, id: string, name: string, isWritable: boolean) => ({
  kind,
  id,
  title: id,
  display,
  connection: 'bath',
  address: { name, isWritable },
});
const rig = (configuration: object, id = 'bath-1') => ({
  id,
  title: id,
  isBench: id === 'bench',
  periodMs: 50,
  connections: [{ id: 'bath', title: 'Bath', adapter: 'bath', configuration }],
  channels: [channel('sensor', 'temp', 'temp', false), channel('actuator', 'setpoint', 'setpoint', true)],
});

it("judges a rig's wiring by the plug-in's own schemas", async () => {
  const { status, body } = await client.call('POST', 'rigs', rig({ host: '', port: 0 }));
  expect(status).toBe(400);
  expect(body.errors.map(({ field }: { field: string }) => field)).toEqual([
    'connections[0].configuration.host',
    'connections[0].configuration.port',
  ]);
});

it('reads a rig through the plug-in, in the host of the rig', async () => {
  await client.expect(201, 'POST', 'rigs', rig({ host: '127.0.0.1', port: device.port }));
  const { socket, messages } = await client.live();
  socket.send(JSON.stringify({ type: 'subscribe', rigId: 'bath-1' }));
  await until('the temperature comes through', () =>
    messages.some(
      (message) =>
        message.type === 'telemetry' && message.telemetry.rows.some(({ values }) => values[0] === 21.5),
    ),
  );
  socket.close();
  const { connections } = await client.get('rigs/bath-1/status');
  expect(connections).toEqual([{ id: 'bath', isConnected: true, error: null, injectedFault: null }]);
}, 30_000);

describe('a fault on a connection', () => {
  beforeAll(async () => {
    const configuration = { host: '127.0.0.1', port: device.port };
    for (const id of ['bench', 'machine']) await client.expect(201, 'POST', 'rigs', rig(configuration, id));
  });

  describeInjectedFaults(() => ({
    url: server.url,
    dataFolder: join(folder, 'data'),
    administrator: client,
  }));
});
