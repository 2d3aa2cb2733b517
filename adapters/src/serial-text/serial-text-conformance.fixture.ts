import type { ConformanceFixture } from '../conformance/conformance-fixture.js';
import { type SerialTextAddress, serialTextAddressSchema } from './serial-text-address.schema.js';
import type { SerialTextConfiguration } from './serial-text-configuration.js';
import { serialTextConfigurationSchema } from './serial-text-configuration.schema.js';
import { serialTextAdapter } from './serial-text.adapter.js';
import { ScriptedInstrument } from './testing/scripted-instrument.js';

const timeoutMs = 3000;

const configurationFor = (path: string): SerialTextConfiguration =>
  serialTextConfigurationSchema.parse({
    path,
    baudRate: 115_200,
    timeoutMs,
    replyTimeoutMs: 250,
    resyncMs: 80,
    refusals: ['ERR*'],
    silencesUntilLost: 1000,
  });

const cell = (name: string, more: object = {}): SerialTextAddress =>
  serialTextAddressSchema.parse({
    query: 'GET {channel}',
    write: 'SET {channel} {value}',
    acknowledgement: 'OK',
    prefix: `${name}=`,
    channel: name,
    max: 1000,
    min: -1000,
    ...more,
  });

const cells = [
  { address: cell('A'), values: [1.125, -7] },
  { address: cell('B', { scale: 0.5, offset: 10, decimals: 1 }), values: [10.5, -20] },
  { address: cell('C', { writeNotation: 'exponent', decimals: 5 }), values: [99, 0.000125] },
  { address: cell('D', { writeNotation: 'hex', notation: 'hex', min: 0 }), values: [255, 16] },
] as const;

/** 600 points that a list of three decimals and a 32-bit float both carry exactly. */
const points = Array.from({ length: 600 }, (_, point) => point / 8 - 30);
const traces = [
  { address: serialTextAddressSchema.parse({ query: 'LIST', shape: 'list', points: 600 }), points },
  { address: serialTextAddressSchema.parse({ query: 'BLOCK', shape: 'block', points: 600 }), points },
];

function blockOf(values: readonly number[]): Buffer {
  const bytes = Buffer.alloc(values.length * 4);
  values.forEach((value, index) => bytes.writeFloatBE(value, index * 4));
  return Buffer.concat([Buffer.from(`#4${bytes.length}`), bytes, Buffer.from('\n')]);
}

/** Values by name as the instrument keeps them: text. */
function scriptOn(held: Map<string, string>): (command: string) => string | Buffer {
  return (command) => {
    if (command === 'LIST') return `${points.map((value) => value.toFixed(3)).join(',')}\n`;
    if (command === 'BLOCK') return blockOf(points);
    const [verb, name = '', text = ''] = command.split(' ');
    if (!held.has(name) || name === 'RO') return name === 'RO' ? 'RO=5\n' : 'ERR 2\n';
    if (verb === 'GET') return `${name}=${held.get(name)}\n`;
    held.set(name, text);
    return 'OK\n';
  };
}

/** The instrument's own number, past the adapter. */
function peek(held: Map<string, string>, { channel }: SerialTextAddress): number {
  const text = held.get(channel) ?? 'none';
  if (channel === 'D') return parseInt(text, 16);
  return channel === 'B' ? Number(text) * 0.5 + 10 : Number(text);
}

/** An instrument on a pseudo-terminal, with the real binding. */
export const serialTextFixture: ConformanceFixture<SerialTextConfiguration, SerialTextAddress> = {
  title: 'serial-text on a pseudo-terminal',
  adapter: serialTextAdapter,
  timeoutMs,
  provokes: ['refuse', 'read-only', 'silence', 'garble', 'cut', 'unreachable', 'trace'],
  malformedConfiguration: { path: '' },
  malformedAddress: { query: 'GET {value}' },
  start() {
    const held = new Map(['A', 'B', 'C', 'D'].map((name) => [name, '0']));
    const instrument = new ScriptedInstrument(scriptOn(held));
    const heldBack: Buffer[] = [];
    const pass = instrument.transmit;
    return Promise.resolve({
      configuration: configurationFor(instrument.path),
      cells,
      traces,
      peek: (address) => peek(held, address),
      refused: cell('X'),
      readOnly: serialTextAddressSchema.parse({ query: 'GET RO', prefix: 'RO=' }),
      unreachable: configurationFor(`${instrument.path}-none`),
      // Replies are held back and come late, when the next command may be on its way.
      silence: () => (instrument.transmit = (bytes) => heldBack.push(bytes)),
      garble: () =>
        (instrument.transmit = (bytes) => {
          pass(Buffer.concat([Buffer.from([0xfe, 0x80]), bytes]));
        }),
      recover: () => {
        instrument.transmit = pass;
        for (const bytes of heldBack.splice(0)) pass(bytes);
      },
      cut: () => {
        instrument.cut();
      },
      stop: () => instrument.stop(),
    });
  },
};
