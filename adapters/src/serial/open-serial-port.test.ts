import { SerialPortMock } from 'serialport';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { closeSerialPort, openSerialPort, type SerialPortOptions } from './open-serial-port.js';
import { characterTimeS, type SerialPortSettings } from './serial-port.schema.js';

const path = '/dev/mock0';
const settings: SerialPortSettings = { path, baudRate: 19_200, dataBits: 8, parity: 'even', stopBits: 1 };
const never = new AbortController().signal;

let asked: SerialPortOptions[] = [];
const makeMock = (options: SerialPortOptions): SerialPortMock => {
  asked.push(options);
  return new SerialPortMock(options);
};

beforeEach(() => {
  asked = [];
  SerialPortMock.binding.createPort(path);
});

afterEach(() => {
  SerialPortMock.binding.reset();
});

describe('opening a serial port', () => {
  it.each([
    [{ dataBits: 7, parity: 'odd', stopBits: 2, baudRate: 300 } as const],
    [{ dataBits: 5, parity: 'none', stopBits: 1.5, baudRate: 115_200 } as const],
  ])('hands the line settings %o to the binding', async (change) => {
    const port = await openSerialPort({ ...settings, ...change }, never, makeMock);
    expect(port.settings).toMatchObject(change);
    await closeSerialPort(port);
  });

  it.each([
    ['none', { rtscts: false, xon: false, xoff: false }],
    ['rts-cts', { rtscts: true, xon: false, xoff: false }],
    ['xon-xoff', { rtscts: false, xon: true, xoff: true }],
  ] as const)('hands flow control %s to the binding', async (flowControl, expected) => {
    const port = await openSerialPort({ ...settings, flowControl }, never, makeMock);
    expect(port.settings).toMatchObject(expected);
    await closeSerialPort(port);
    await closeSerialPort(port);
    expect(port.isOpen).toBe(false);
  });

  it('names the port that does not exist', async () => {
    await expect(openSerialPort({ ...settings, path: '/dev/none' }, never, makeMock)).rejects.toMatchObject({
      code: 'adapter.disconnected',
      message: expect.stringMatching(/^\/dev\/none: there is no such port/),
    });
    const real = openSerialPort({ ...settings, path: '/dev/cresthold-no-such-port' }, never);
    await expect(real).rejects.toMatchObject({
      code: 'adapter.disconnected',
      message: expect.stringContaining('there is no such port'),
    });
  });

  it('says so where another program has the port', async () => {
    const port = await openSerialPort(settings, never, makeMock);
    await expect(openSerialPort(settings, never, makeMock)).rejects.toMatchObject({
      code: 'adapter.disconnected',
      message: expect.stringContaining('another program has the port open'),
    });
    await closeSerialPort(port);
  });

  it('aborted before or while it opens is adapter.cancelled and leaves the port free', async () => {
    const cancelled = { code: 'adapter.cancelled' };
    await expect(openSerialPort(settings, AbortSignal.abort(), makeMock)).rejects.toMatchObject(cancelled);
    const abort = new AbortController();
    const opening = openSerialPort(settings, abort.signal, makeMock);
    abort.abort();
    await expect(opening).rejects.toMatchObject(cancelled);
    await closeSerialPort(await openSerialPort(settings, never, makeMock));
  });
});

it('a character at 1200 8E1 takes 11 bits, so that 3.5 of them take 32.083 ms', () => {
  // The silent interval of a MODBUS serial line at 1200 baud, Serial Line guide V1.02 (11-bit characters).
  expect(3.5 * characterTimeS({ ...settings, baudRate: 1200 })).toBeCloseTo(0.032083, 6);
});
