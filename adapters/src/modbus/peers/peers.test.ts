import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Adapter, AdapterSession } from '../../contract.js';
import { modbusRtuAdapter } from '../../modbus-rtu/modbus-rtu.adapter.js';
import { modbusRtuConfigurationSchema } from '../../modbus-rtu/modbus-rtu-configuration.schema.js';
import { modbusTcpAdapter } from '../../modbus-tcp/modbus-tcp.adapter.js';
import { modbusTcpConfigurationSchema } from '../../modbus-tcp/modbus-tcp-configuration.schema.js';
import { type ModbusAddress, modbusAddressSchema } from '../modbus-address.schema.js';
import { startPtyPair } from '../testing/pty-pair.js';
import { type CompiledPeer, compilePeer, pymodbusServer, startPeer } from './peer-process.js';

const unit = 17;
const at = (table: string, address: number, type = 'u16', more: object = {}): ModbusAddress =>
  modbusAddressSchema.parse({ unit, table, address, type, ...more });
const holding = (address: number, type = 'u16', more: object = {}): ModbusAddress =>
  at('holding-register', address, type, more);
const run = (table: string, from: number, count: number, type: string): ModbusAddress[] =>
  Array.from({ length: count }, (_, index) => at(table, from + index, type));

type Session = AdapterSession<ModbusAddress>;
type Open = (more?: object) => Promise<Session>;
interface Wire {
  open: Open;
  stop(): Promise<void>;
}

const openWith = <C>(adapter: Adapter<C, ModbusAddress>, configuration: C): Promise<Session> =>
  adapter.open(configuration, new AbortController().signal);

async function overTcp(command: readonly string[]): Promise<Wire> {
  const peer = await startPeer(command, ['tcp', String(unit)]);
  const basic = { host: '127.0.0.1', port: Number(peer.said), timeoutMs: 5000 };
  return {
    open: (more) => openWith(modbusTcpAdapter, modbusTcpConfigurationSchema.parse({ ...basic, ...more })),
    stop: () => peer.stop(),
  };
}

async function overRtu(command: readonly string[], baudRate: number, parity: 'even' | 'none'): Promise<Wire> {
  const pair = await startPtyPair();
  // A pseudo-terminal carries no parity bit, and the C library calls it an error to ask for one twice, which is what
  // pymodbus does: that end is opened without. libmodbus and our own end ask once and are given what the test says.
  const letter = parity === 'even' && command !== pymodbusServer ? 'E' : 'N';
  const peer = await startPeer(command, ['rtu', String(unit), pair.far, String(baudRate), letter]);
  const basic = { path: pair.near, baudRate, parity, timeoutMs: 10_000, unitTimeoutMs: 2000 };
  return {
    open: (more) => openWith(modbusRtuAdapter, modbusRtuConfigurationSchema.parse({ ...basic, ...more })),
    async stop() {
      await peer.stop();
      await pair.stop();
    },
  };
}

let libmodbus: CompiledPeer;
beforeAll(async () => {
  libmodbus = await compilePeer('libmodbus-server.c');
}, 60_000);
afterAll(() => libmodbus.remove());

// Both servers answer with their own code; what they hold is in their sources beside this file.
describe.each<[string, () => Promise<Wire>]>([
  ['libmodbus over TCP', () => overTcp([libmodbus.path])],
  ['libmodbus over RTU at 9600 8E1', () => overRtu([libmodbus.path], 9600, 'even')],
  ['libmodbus over RTU at 115200 8N1', () => overRtu([libmodbus.path], 115_200, 'none')],
  ['pymodbus over TCP', () => overTcp(pymodbusServer)],
  ['pymodbus over RTU at 9600 8E1', () => overRtu(pymodbusServer, 9600, 'even')],
  ['pymodbus over RTU at 115200 8N1', () => overRtu(pymodbusServer, 115_200, 'none')],
])('a server on %s', (_, start) => {
  let wire: Wire;
  let session: Session;

  beforeAll(async () => {
    wire = await start();
    session = await wire.open();
  }, 20_000);
  afterAll(async () => {
    await session.close();
    await wire.stop();
  });

  async function readAll(addresses: readonly ModbusAddress[], on = session): Promise<number[]> {
    const { values, faults } = await on.read(on.planRead(addresses));
    expect(faults.filter((fault) => fault !== null)).toEqual([]);
    return [...values];
  }

  async function writeAll(addresses: ModbusAddress[], values: number[], on = session): Promise<void> {
    expect(await on.write(addresses, values)).toEqual({ faults: addresses.map(() => null), lost: null });
  }

  it('is read as the worked examples of the application protocol say (FC01 to FC04)', async () => {
    // MODBUS Application Protocol V1.1b3, 6.1 to 6.4: coils CD 6B B2 0E 1B, inputs AC DB 35.
    const coils = await readAll(run('coil', 0x13, 37, 'bit'));
    expect(coils.slice(0, 16)).toEqual([1, 0, 1, 1, 0, 0, 1, 1, 1, 1, 0, 1, 0, 1, 1, 0]);
    const inputs = await readAll(run('discrete-input', 0xc4, 22, 'bit'));
    expect(inputs.slice(0, 8)).toEqual([0, 0, 1, 1, 0, 1, 0, 1]);
    expect(await readAll(run('holding-register', 0x6b, 3, 'u16'))).toEqual([555, 0, 100]);
    expect(await readAll([at('input-register', 8)])).toEqual([10]);
  });

  it('is read in all four orders of a float', async () => {
    const orders = [
      holding(200, 'f32'),
      holding(202, 'f32', { wordOrder: 'little' }),
      holding(204, 'f32', { byteOrder: 'little' }),
      holding(206, 'f32', { wordOrder: 'little', byteOrder: 'little' }),
    ];
    expect(await readAll(orders)).toEqual([123_456, 123_456, 123_456, 123_456]);
  });

  it('takes coils singly and in runs (FC05, FC15)', async () => {
    const coils = run('coil', 500, 11, 'bit');
    const states = [1, 0, 1, 1, 0, 0, 1, 1, 0, 1, 1];
    await writeAll(coils, states);
    await writeAll([coils[1]!], [1]);
    expect(await readAll(coils)).toEqual([1, 1, ...states.slice(2)]);
  });

  it('takes registers singly and in runs (FC06, FC16), of every type', async () => {
    const addresses = [holding(300, 'i16'), holding(301, 'f32'), holding(303, 'f64'), holding(307, 'i64')];
    const values = [-3, 100.25, -118.625, -(2 ** 40)];
    await writeAll(addresses, values);
    await writeAll([holding(300, 'i16')], [-4]);
    expect(await readAll(addresses)).toEqual([-4, ...values.slice(1)]);
  });

  it('takes bit fields by mask and leaves their neighbours alone (FC22)', async () => {
    await writeAll([holding(310)], [0b1010_0101_1100_0011]);
    const fields = [
      holding(310, 'u16', { bits: { from: 4, count: 4 } }),
      holding(310, 'u16', { bits: { from: 15 } }),
    ];
    await writeAll(fields, [0b0101, 0]);
    expect(await readAll([holding(310), ...fields])).toEqual([0b0010_0101_0101_0011, 0b0101, 0]);
    const withoutMask = holding(310, 'u16', { bits: { from: 0, count: 2 }, hasMaskWrite: false });
    await writeAll([withoutMask], [0]);
    expect(await readAll([holding(310)])).toEqual([0b0010_0101_0101_0000]);
  });

  it('gives a trace of 700 points over six requests', async () => {
    const plan = session.planRead([holding(1000, 'u16', { points: 700, scale: 0.5 }), holding(0x6b)]);
    expect(plan.requests).toBe(7);
    const { traces, values, faults } = await session.read(plan);
    expect(faults).toEqual([null, null]);
    expect(traces?.[0]).toEqual(Float64Array.from({ length: 700 }, (_, index) => (1000 + index) / 2));
    expect([traces?.[1], values[0], values[1]]).toEqual([null, NaN, 555]);
  });

  it('refuses an address that it does not have, and that alone', async () => {
    const { faults, values } = await session.read(session.planRead([holding(2099), holding(2100)]));
    expect(faults.map((fault) => fault?.code)).toEqual([undefined, 'adapter.refused']);
    expect(faults[1]?.message).toContain('exception 02 (illegal data address)');
    expect(values[0]).toBe(2099);
  });

  it('shows what came over the wire', async () => {
    const probe = await session.probe?.(holding(200, 'f32'));
    expect(probe).toMatchObject({
      raw: 'holding-register 200 to 201: 0x47F1 0x2000',
      value: 123_456,
      fault: null,
    });
  });

  it('reads back what it writes (FC23)', async () => {
    await session.close();
    const checking = await wire.open({ readBack: true });
    await writeAll([holding(320), holding(321)], [10, 258], checking);
    expect(await readAll([holding(320), holding(321)], checking)).toEqual([10, 258]);
    await checking.close();
    session = await wire.open();
  });
});
