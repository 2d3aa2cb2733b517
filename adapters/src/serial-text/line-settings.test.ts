import { SerialPortMock } from 'serialport';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import type { AdapterSession } from '../contract.js';
import type { SerialPortOptions } from '../serial/open-serial-port.js';
import type { SerialTextAddress } from './serial-text-address.schema.js';
import { serialTextConfigurationSchema } from './serial-text-configuration.schema.js';
import { makeSerialTextAdapter, serialTextAdapter } from './serial-text.adapter.js';
import { textAddress } from './testing/open-text.js';
import { ScriptedInstrument } from './testing/scripted-instrument.js';

/** What the port was told, in order: what was sent, and how RTS was set. */
let course: string[] = [];
let ports: SerialPortMock[] = [];
/** Sends this reply once something has been written. */
let reply: string | null = null;

/** The library's mock does not keep what RTS was set to; this one does. */
class WatchedPort extends SerialPortMock {
  override set(options: { rts?: boolean }, callback?: (error: Error | null) => void): void {
    course.push(`rts ${String(options.rts)}`);
    super.set(options, callback);
  }

  override write(chunk: unknown, ...rest: unknown[]): boolean {
    course.push(`sent ${String(chunk)}`);
    if (reply !== null) setTimeout(() => this.port?.emitData(Buffer.from(reply ?? '')), 5);
    return (super.write as (...all: unknown[]) => boolean).call(this, chunk, ...rest);
  }

  override drain(callback?: (error: Error | null) => void): void {
    course.push('drained');
    super.drain(callback);
  }
}

const adapter = makeSerialTextAdapter((options: SerialPortOptions) => {
  const port = new WatchedPort(options);
  ports.push(port);
  return port;
});

const path = '/dev/mock0';
const open = (configuration: object): Promise<AdapterSession<SerialTextAddress>> =>
  adapter.open(
    serialTextConfigurationSchema.parse({ path, replyTimeoutMs: 200, ...configuration }),
    new AbortController().signal,
  );

beforeEach(() => {
  course = [];
  ports = [];
  reply = null;
  SerialPortMock.binding.createPort(path);
});
afterEach(() => {
  SerialPortMock.binding.reset();
});

const query = textAddress({ query: 'Q?' });

describe('the settings of the line', () => {
  it.each([
    [
      { baudRate: 300, dataBits: 7, parity: 'even', stopBits: 2 },
      { baudRate: 300, dataBits: 7, parity: 'even', stopBits: 2, rtscts: false, xon: false, xoff: false },
    ],
    [{ flowControl: 'rts-cts' }, { rtscts: true, baudRate: 9600, dataBits: 8, parity: 'none', stopBits: 1 }],
    [{ flowControl: 'xon-xoff' }, { rtscts: false, xon: true, xoff: true }],
    [{ profile: 'nmea-0183' }, { baudRate: 4800 }],
    [{ profile: 'nmea-0183', baudRate: 38_400 }, { baudRate: 38_400 }],
  ])('%o reach the port', async (configuration, expected) => {
    const session = await open(configuration);
    expect(ports[0]?.settings).toMatchObject(expected);
    await session.close();
    expect(ports[0]?.isOpen).toBe(false);
  });
});

describe('the direction of a two-wire line', () => {
  it.each([
    ['rts-high', 'true', 'false'],
    ['rts-low', 'false', 'true'],
  ])('is turned with RTS, %s', async (rs485, sending, listening) => {
    reply = '1.5\n';
    const session = await open({ rs485, rs485BeforeMs: 2, rs485AfterMs: 2 });
    const { values } = await session.read(session.planRead([query]));
    expect([...values]).toEqual([1.5]);
    expect(course).toEqual([
      `rts ${listening}`,
      `rts ${sending}`,
      'sent Q?\n',
      'drained',
      `rts ${listening}`,
    ]);
    await session.close();
  });

  it('is left alone where the converter turns it, with a pause before each command', async () => {
    reply = '1.5\n';
    const session = await open({ rs485: 'automatic', rs485BeforeMs: 20 });
    const fromMs = performance.now();
    await session.read(session.planRead([query]));
    expect(performance.now() - fromMs).toBeGreaterThan(19);
    expect(course).toEqual(['sent Q?\n']);
    await session.close();
  });

  it('that the port cannot turn is adapter.misconfigured, with what to use', async () => {
    // A pseudo-terminal has no line RTS.
    const instrument = new ScriptedInstrument(() => null);
    const configuration = serialTextConfigurationSchema.parse({ path: instrument.path, rs485: 'rts-high' });
    const opening = serialTextAdapter.open(configuration, new AbortController().signal);
    await expect(opening).rejects.toMatchObject({
      code: 'adapter.misconfigured',
      message: expect.stringContaining('use "automatic"'),
      details: [{ field: 'rs485' }],
    });
    await instrument.stop();
  });
});

describe('a device that lets nothing be sent', () => {
  it.each(['write', 'drain'] as const)('is lost within its time where %s does not end', async (method) => {
    const session = await open({ flowControl: 'rts-cts', timeoutMs: 250 });
    const port = ports[0];
    if (!port) throw new Error('no port was made');
    port[method] = () => true;
    const flushed = vi.spyOn(port, 'flush');
    const { lost } = await session.read(session.planRead([query]));
    expect(lost).toMatchObject({
      code: 'adapter.disconnected',
      message: expect.stringContaining('lets nothing be sent'),
    });
    // What is stuck must not go out, old, when the device lets go.
    expect(flushed).toHaveBeenCalledTimes(1);
    await session.close();
    expect(port.isOpen).toBe(false);
  });
});

it('a pause between commands that does not fit into the call is adapter.timeout', async () => {
  reply = '1\n';
  const session = await open({ commandGapMs: 9000, timeoutMs: 250 });
  const plan = session.planRead([query, textAddress({ query: 'R?' })]);
  const { values, faults } = await session.read(plan);
  expect([values[0], faults[1]?.code]).toEqual([1, 'adapter.timeout']);
  expect(faults[1]?.message).toContain('no time was left after the pause between commands');
  await session.close();
});

it('a port that fails while it writes is lost', async () => {
  const session = await open({});
  const port = ports[0];
  if (!port?.port) throw new Error('no port was made');
  port.port.write = () => Promise.reject(new Error('no such device or address'));
  const { lost } = await session.read(session.planRead([query]));
  expect(lost?.code).toBe('adapter.disconnected');
  await session.close();
});
