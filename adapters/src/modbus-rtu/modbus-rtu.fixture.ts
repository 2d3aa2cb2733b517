import type { ConformanceFixture } from '../conformance/conformance-fixture.js';
import { type ModbusAddress, modbusAddressSchema } from '../modbus/modbus-address.schema.js';
import { RegisterMap } from '../modbus/testing/register-map.js';
import { modbusRtuAdapter } from './modbus-rtu.adapter.js';
import {
  type ModbusRtuConfiguration,
  modbusRtuConfigurationSchema,
} from './modbus-rtu-configuration.schema.js';
import { answerFrame } from './testing/answer-frame.js';
import { type Respond, startScriptedLine } from './testing/scripted-line.js';

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
  { address: holding(120, 'u16', { bits: { from: 4, count: 3 } }), values: [5, 2] },
] as const;

const points = Array.from({ length: 300 }, (_, index) => index - 150);

/** The device's own words read as the standards write them, past the code under test. */
function peek({ holding: words, coils }: RegisterMap, { table, address, type, bits }: ModbusAddress): number {
  const high = words.get(address) ?? NaN;
  const next = words.get(address + 1) ?? NaN;
  if (table === 'coil') return Number(coils.get(address));
  if (bits) return Math.floor(high / 2 ** bits.from) % 2 ** bits.count;
  if (type === 'f32') return Buffer.from([next >> 8, next & 255, high >> 8, high & 255]).readFloatBE();
  if (type === 'u32') return high * 65_536 + next;
  return type === 'i16' ? Int16Array.of(high)[0]! * 0.5 + 10 : high;
}

function filledMap(): RegisterMap {
  const map = new RegisterMap();
  for (const address of [100, 101, 102, 103, 110, 111, 120]) map.holding.set(address, 0);
  points.forEach((value, index) => map.holding.set(500 + index, value & 0xffff));
  map.input.set(7, 0);
  map.coils.set(3, false);
  return map;
}

/** The adapter on a pseudo-terminal, with a device of the tests at its other end. */
export const modbusRtuFixture: ConformanceFixture<ModbusRtuConfiguration, ModbusAddress> = {
  title: 'modbus-rtu on a pseudo-terminal',
  adapter: modbusRtuAdapter,
  timeoutMs,
  provokes: ['refuse', 'read-only', 'silence', 'garble', 'unreachable', 'trace'],
  malformedConfiguration: { path: '/dev/null', baudRate: 1 },
  malformedAddress: { unit: 0, table: 'holding-register', address: 1, type: 'u16' },
  async start() {
    const map = filledMap();
    const answer: Respond = (frame, send) => {
      send(answerFrame(map, frame));
    };
    const line = await startScriptedLine(answer);
    const held: (() => void)[] = [];
    const configuration = modbusRtuConfigurationSchema.parse({
      path: line.path,
      baudRate: 115_200,
      timeoutMs,
      unitTimeoutMs: timeoutMs,
      silencesUntilLost: 50,
    });
    return {
      configuration,
      cells,
      traces: [{ address: holding(500, 'i16', { points: points.length }), points }],
      peek: (address) => peek(map, address),
      refused: holding(104),
      readOnly: modbusAddressSchema.parse({ table: 'input-register', address: 7, type: 'u16' }),
      unreachable: { ...configuration, path: `${line.path}-none` },
      // Answers are held back and come late, before the next request.
      silence: () => {
        line.respond = (frame, send) => {
          held.push(() => {
            answer(frame, send);
          });
        };
      },
      garble: () => {
        line.respond = (frame, send) => {
          answer(frame, (bytes) => {
            bytes[bytes.length - 1]! ^= 1;
            send(bytes);
          });
        };
      },
      recover: () => {
        for (const release of held.splice(0)) release();
        line.respond = answer;
      },
      stop: () => line.stop(),
    };
  },
};
