import { describe, it } from 'vitest';
import type { ConformanceFixture } from '../conformance/conformance-fixture.js';
import { describeAdapterConformance } from '../conformance/describe-adapter-conformance.js';
import { type SerialTextAddress, serialTextAddressSchema } from './serial-text-address.schema.js';
import type { SerialTextConfiguration } from './serial-text-configuration.js';
import { serialTextConfigurationSchema } from './serial-text-configuration.schema.js';
import { serialTextAdapter } from './serial-text.adapter.js';
import { ScriptedInstrument } from './testing/scripted-instrument.js';

const timeoutMs = 2500;

const configurationFor = (path: string): SerialTextConfiguration =>
  serialTextConfigurationSchema.parse({
    path,
    baudRate: 115_200,
    timeoutMs,
    replyTimeoutMs: 150,
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

/** Values by name as the instrument keeps them: text. */
function scriptOn(held: Map<string, string>): (command: string) => string {
  return (command) => {
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

const fixture: ConformanceFixture<SerialTextConfiguration, SerialTextAddress> = {
  title: 'serial-text on a pseudo-terminal',
  adapter: serialTextAdapter,
  timeoutMs,
  provokes: ['refuse', 'read-only', 'silence', 'garble', 'cut', 'unreachable'],
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

describeAdapterConformance(fixture, { describe, it });
