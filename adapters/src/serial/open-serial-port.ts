import { isMainThread } from 'node:worker_threads';
import { DomainError } from '@cresthold/shared';
import { SerialPort, type SerialPortMock } from 'serialport';
import type { SerialPortSettings } from './serial-port.schema.js';

export type OpenSerialPort = SerialPort | SerialPortMock;

export interface SerialPortOptions {
  path: string;
  baudRate: number;
  dataBits: SerialPortSettings['dataBits'];
  parity: SerialPortSettings['parity'];
  stopBits: SerialPortSettings['stopBits'];
  rtscts: boolean;
  xon: boolean;
  xoff: boolean;
  autoOpen: false;
}

/** Makes a port that is not open yet; the real one, or the library's mock in tests. */
export type SerialPortMaker = (options: SerialPortOptions) => OpenSerialPort;

const makeRealPort: SerialPortMaker = (options) => new SerialPort(options);

/**
 * Opens a serial port.
 *
 * @throws adapter.cancelled, adapter.disconnected naming the port and what to do
 */
export async function openSerialPort(
  settings: SerialPortSettings,
  signal: AbortSignal,
  makePort: SerialPortMaker = makeRealPort,
): Promise<OpenSerialPort> {
  // The binding aborts the whole process when it is opened in a worker thread.
  if (!isMainThread) throw new Error('serial ports are opened on the main thread only');
  if (signal.aborted) throw new DomainError('adapter.cancelled', 'Opening was cancelled.');
  const port = makePort(optionsOf(settings));
  await new Promise<void>((resolve, reject) => {
    port.open((error) => {
      if (error) reject(portFault(settings.path, error));
      else resolve();
    });
  });
  // Read again: the operating system cannot take back an opening, so the abort is judged after it.
  if (isAborted(signal)) {
    await closeSerialPort(port);
    throw new DomainError('adapter.cancelled', 'Opening was cancelled.');
  }
  return port;
}

function optionsOf(settings: SerialPortSettings): SerialPortOptions {
  const { path, baudRate, dataBits, parity, stopBits, flowControl = 'none' } = settings;
  const hasXon = flowControl === 'xon-xoff';
  return {
    path,
    baudRate,
    dataBits,
    parity,
    stopBits,
    rtscts: flowControl === 'rts-cts',
    xon: hasXon,
    xoff: hasXon,
    autoOpen: false,
  };
}

function isAborted(signal: AbortSignal): boolean {
  return signal.aborted;
}

/** Resolves when the port is released; may be called on a port that is closed already. */
export function closeSerialPort(port: OpenSerialPort): Promise<void> {
  port.on('error', () => undefined);
  if (!port.isOpen) return Promise.resolve();
  return new Promise((resolve) => {
    port.close(() => {
      resolve();
    });
  });
}

const reasons: readonly (readonly [pattern: RegExp, reason: string])[] = [
  [/no such file|does not exist|file not found/i, 'there is no such port: check the path and the cable'],
  [
    /permission denied|access denied/i,
    'this account may not use the port: on Linux add it to the group "dialout"',
  ],
  [/lock|temporarily unavailable|busy/i, 'another program has the port open: close it there'],
];

/** What an error of the port means, with its path. */
export function portFault(path: string, error: Error): DomainError {
  const reason = reasons.find(([pattern]) => pattern.test(error.message))?.[1] ?? 'the port failed';
  return new DomainError('adapter.disconnected', `${path}: ${reason} (${error.message}).`, [], {
    cause: error,
  });
}
