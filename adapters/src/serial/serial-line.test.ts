import { SerialPortMock } from 'serialport';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { listSerialPorts, type SerialPortMaker } from './open-serial-port.js';
import { openSerialLine, type SerialLine } from './serial-line.js';
import { serialLineConfigurationSchema } from './serial-line.schema.js';

/** Waits end as soon as they can; a busy machine gets time. */
const patient = { timeout: 4000, interval: 1 };

const path = '/dev/mock0';
const configuration = serialLineConfigurationSchema.parse({ path, baudRate: 19_200, parity: 'even' });
const never = new AbortController().signal;

let made: SerialPortMock[] = [];
const makeMock: SerialPortMaker = (options) => {
  const port = new SerialPortMock(options);
  made.push(port);
  return port;
};

const open = (): Promise<SerialLine> => openSerialLine(configuration, never, makeMock);

/** What the device sends. */
function sendFromDevice(text: string): void {
  made.at(-1)?.port?.emitData(Buffer.from(text));
}

beforeEach(() => {
  made = [];
  SerialPortMock.binding.createPort(path, { echo: false, record: true, manufacturer: 'mock' });
});

afterEach(() => {
  SerialPortMock.binding.reset();
});

describe('a serial line', () => {
  it('opens with the settings asked for, sends, receives and is released', async () => {
    const line = await open();
    expect(made[0]?.settings).toMatchObject({ baudRate: 19_200, parity: 'even', dataBits: 8, stopBits: 1 });
    expect(await line.send('*IDN?\n')).toBeNull();
    expect(made[0]?.port?.recording.toString()).toBe('*IDN?\n');
    sendFromDevice('first\nsec');
    sendFromDevice('ond\n');
    expect([await line.nextLine(4000), await line.nextLine(4000)]).toEqual(['first', 'second']);
    await line.close();
    await line.close();
    expect(made[0]?.isOpen).toBe(false);
    await (await open()).close();
  });

  it('silence is adapter.timeout, and a late reply can be discarded', async () => {
    const line = await open();
    expect(await line.nextLine(10)).toMatchObject({ code: 'adapter.timeout' });
    sendFromDevice('late\nhalf of a');
    await expect.poll(() => line.nextLine(5), patient).toBe('late');
    line.discard();
    sendFromDevice('fresh\n');
    expect(await line.nextLine(4000)).toBe('fresh');
    await line.close();
  });

  it('close ends a wait with adapter.cancelled', async () => {
    const line = await open();
    const waiting = line.nextLine(60_000);
    await line.close();
    expect(await waiting).toMatchObject({ code: 'adapter.cancelled' });
    expect(await line.send('x')).toMatchObject({ code: 'adapter.cancelled' });
  });

  it('a port that goes away ends a wait with adapter.disconnected', async () => {
    const line = await open();
    const waiting = line.nextLine(60_000);
    made[0]?.close();
    expect(await waiting).toMatchObject({ code: 'adapter.disconnected' });
    expect(line.lost?.message).toContain(path);
    await line.close();
  });
});

describe('opening', () => {
  it('names the port that does not exist', async () => {
    const opening = openSerialLine({ ...configuration, path: '/dev/none' }, never, makeMock);
    await expect(opening).rejects.toMatchObject({
      code: 'adapter.disconnected',
      message: expect.stringMatching(/^\/dev\/none: there is no such port/),
    });
  });

  it('says so where another program has the port', async () => {
    const line = await open();
    await expect(open()).rejects.toMatchObject({
      code: 'adapter.disconnected',
      message: expect.stringContaining('another program has the port open'),
    });
    await line.close();
  });

  it('aborted before or while it opens is adapter.cancelled and leaves the port free', async () => {
    await expect(openSerialLine(configuration, AbortSignal.abort(), makeMock)).rejects.toMatchObject({
      code: 'adapter.cancelled',
    });
    const abort = new AbortController();
    const opening = openSerialLine(configuration, abort.signal, makeMock);
    abort.abort();
    await expect(opening).rejects.toMatchObject({ code: 'adapter.cancelled' });
    await (await open()).close();
  });

  it('names the setting that is wrong', async () => {
    const opening = openSerialLine({ ...configuration, baudRate: 0 }, never, makeMock);
    await expect(opening).rejects.toMatchObject({
      code: 'adapter.misconfigured',
      details: [{ field: 'baudRate' }],
    });
  });

  it('of a real port that does not exist says the same', async () => {
    const opening = openSerialLine({ ...configuration, path: '/dev/cresthold-no-such-port' }, never);
    await expect(opening).rejects.toMatchObject({
      code: 'adapter.disconnected',
      message: expect.stringContaining('there is no such port'),
    });
  });
});

it('lists ports by path', async () => {
  SerialPortMock.binding.createPort('/dev/mock-a');
  const ports = await listSerialPorts(() => SerialPortMock.list());
  expect(ports.map((port) => port.path)).toEqual(['/dev/mock-a', path]);
  expect(ports[1]?.manufacturer).toBe('mock');
});
