import type { ConformanceFixture } from '../conformance/conformance-fixture.js';
import { type ModbusAddress, modbusAddressSchema } from '../modbus/modbus-address.schema.js';
import type { ModbusTestServer, RegisterMap } from '../modbus/testing/register-map.js';
import { startRelay } from '../modbus/testing/relay.js';
import { modbusTcpAdapter } from './modbus-tcp.adapter.js';
import {
  type ModbusTcpConfiguration,
  modbusTcpConfigurationSchema,
} from './modbus-tcp-configuration.schema.js';

const timeoutMs = 1000;

const holding = (address: number, type = 'u16', more: object = {}): ModbusAddress =>
  modbusAddressSchema.parse({ table: 'holding-register', address, type, ...more });

/** Neighbours, so that the joined requests meet the refused address 104 as well. */
const cells = [
  { address: holding(100), values: [1, 65_535] },
  { address: holding(101, 'i16', { scale: 0.5, offset: 10 }), values: [10, -20.5] },
  { address: holding(102, 'f32', { wordOrder: 'little' }), values: [123_456, -2] },
  { address: holding(110, 'u32'), values: [4_294_967_295, 65_536] },
  { address: modbusAddressSchema.parse({ table: 'coil', address: 3, type: 'bit' }), values: [1, 0] },
] as const;

const points = Array.from({ length: 300 }, (_, index) => index - 150);

/** The device's own words read as the standards write them, past the code under test. */
function peek({ holding: words, coils }: RegisterMap, { table, address, type }: ModbusAddress): number {
  const high = words.get(address) ?? NaN;
  const next = words.get(address + 1) ?? NaN;
  if (table === 'coil') return Number(coils.get(address));
  if (type === 'f32') return Buffer.from([next >> 8, next & 255, high >> 8, high & 255]).readFloatBE();
  if (type === 'u32') return high * 65_536 + next;
  return type === 'i16' ? Int16Array.of(high)[0]! * 0.5 + 10 : high;
}

const configurationFor = (port: number): ModbusTcpConfiguration =>
  modbusTcpConfigurationSchema.parse({ host: '127.0.0.1', port, timeoutMs, silencesUntilLost: 50 });

/** The adapter on a server of the given library, behind a relay. */
export function modbusTcpFixture(
  title: string,
  startServer: () => Promise<ModbusTestServer>,
): ConformanceFixture<ModbusTcpConfiguration, ModbusAddress> {
  return {
    title,
    adapter: modbusTcpAdapter,
    timeoutMs,
    provokes: ['refuse', 'read-only', 'silence', 'garble', 'cut', 'unreachable', 'trace'],
    malformedConfiguration: { host: '127.0.0.1', port: 70_000 },
    malformedAddress: { table: 'holding-register', address: 1, type: 'bit' },
    async start() {
      const server = await startServer();
      for (const address of [100, 101, 102, 103, 110, 111]) server.map.holding.set(address, 0);
      points.forEach((value, index) => server.map.holding.set(500 + index, value & 0xffff));
      server.map.input.set(7, 0);
      server.map.coils.set(3, false);
      const relay = await startRelay(server.port);
      const nowhere = await startRelay(server.port);
      await nowhere.stop();
      return {
        configuration: configurationFor(relay.port),
        cells,
        traces: [{ address: holding(500, 'i16', { points: points.length }), points }],
        peek: (address) => peek(server.map, address),
        refused: holding(104),
        readOnly: modbusAddressSchema.parse({ table: 'input-register', address: 7, type: 'u16' }),
        unreachable: configurationFor(nowhere.port),
        // Answers are held back and come late, in the middle of later requests.
        silence: () => {
          relay.setMode({ kind: 'hold' });
        },
        garble: () => {
          relay.setMode({ kind: 'change', change: withOtherFunction });
        },
        recover: () => {
          relay.setMode({ kind: 'pass' });
        },
        cut: () => {
          relay.cut();
        },
        async stop() {
          await relay.stop();
          await server.stop();
        },
      };
    },
  };
}

/** The function code of a Modbus TCP answer is its eighth byte. */
function withOtherFunction(answer: Buffer): Buffer {
  answer[7] = 0x2b;
  return answer;
}
