import { afterEach, expect, it } from 'vitest';
import type { AdapterSession } from '../contract.js';
import { modbusTcpAdapter } from '../modbus-tcp/modbus-tcp.adapter.js';
import { modbusTcpConfigurationSchema } from '../modbus-tcp/modbus-tcp-configuration.schema.js';
import { type ModbusAddress, modbusAddressSchema } from './modbus-address.schema.js';
import { framed, type ScriptedServer, startScriptedServer } from './testing/scripted-server.js';

const trace: ModbusAddress = modbusAddressSchema.parse({
  table: 'input-register',
  address: 0,
  type: 'u16',
  points: 200,
  stamp: 999,
});

let server: ScriptedServer;
let session: AdapterSession<ModbusAddress>;

afterEach(async () => {
  await session.close();
  await server.stop();
});

/** A device whose every word is the number of its array, which changes after so many requests. */
async function startDevice(numberAt: (request: number) => number): Promise<void> {
  server = await startScriptedServer((request, socket, transaction) => {
    const number = numberAt(server.requests.length);
    const count = request.readUInt16BE(4);
    const words = Array.from({ length: count }, () => [number >> 8, number & 255]).flat();
    socket.write(framed(transaction, Uint8Array.from([1, 4, 2 * count, ...words])));
  });
  const configuration = modbusTcpConfigurationSchema.parse({ host: '127.0.0.1', port: server.port });
  session = await modbusTcpAdapter.open(configuration, new AbortController().signal);
}

it('a trace that the device changed in the middle is read again', async () => {
  // Stamp, first chunk, then a new array, second chunk, stamp; from then on it stays.
  await startDevice((request) => (request <= 2 ? 1 : 2));
  const plan = session.planRead([trace]);
  expect(plan.requests).toBe(4);
  const { traces, faults } = await session.read(plan);
  expect([server.requests.length, faults[0]]).toEqual([8, null]);
  expect(traces?.[0]).toEqual(new Float64Array(200).fill(2));
});

it('a trace that the device changes all the time is a fault, and nothing of it is shown', async () => {
  await startDevice((request) => request);
  const { traces, faults } = await session.read(session.planRead([trace]));
  expect(faults[0]).toMatchObject({
    code: 'adapter.corrupt',
    message: expect.stringContaining('changed the array'),
  });
  expect(traces?.[0]?.every((value) => Number.isNaN(value))).toBe(true);
});

it('describes its points and that it can only be read', async () => {
  await startDevice(() => 1);
  expect(session.describe(trace)).toMatchObject({ points: 200, isWritable: false });
  const { faults } = await session.write([trace], [1]);
  expect(faults[0]?.code).toBe('adapter.misconfigured');
});
