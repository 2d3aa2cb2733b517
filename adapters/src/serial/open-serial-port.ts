import { isMainThread } from 'node:worker_threads';
import { DomainError } from '@cresthold/shared';
import { SerialPort, type SerialPortMock } from 'serialport';
import type { SerialLineConfiguration } from './serial-line.schema.js';

export type OpenSerialPort = SerialPort | SerialPortMock;

export interface SerialPortOptions {
  path: string;
  baudRate: number;
  dataBits: SerialLineConfiguration['dataBits'];
  parity: SerialLineConfiguration['parity'];
  stopBits: SerialLineConfiguration['stopBits'];
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
  configuration: SerialLineConfiguration,
  signal: AbortSignal,
  makePort: SerialPortMaker = makeRealPort,
): Promise<OpenSerialPort> {
  // The binding aborts the whole process when it is opened in a worker thread.
  if (!isMainThread) throw new Error('serial ports are opened on the main thread only');
  if (signal.aborted) throw new DomainError('adapter.cancelled', 'Opening was cancelled.');
  const { path, baudRate, dataBits, parity, stopBits } = configuration;
  const port = makePort({ path, baudRate, dataBits, parity, stopBits, autoOpen: false });
  await new Promise<void>((resolve, reject) => {
    port.open((error) => {
      if (error) reject(portFault(path, error));
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

export interface SerialPortListing {
  path: string;
  manufacturer: string | null;
  serialNumber: string | null;
}

/** The serial ports that the operating system knows, by path. */
export async function listSerialPorts(
  list: () => Promise<{ path: string; manufacturer?: string; serialNumber?: string }[]> = () =>
    SerialPort.list(),
): Promise<SerialPortListing[]> {
  const ports = await list();
  return ports
    .map(({ path, manufacturer, serialNumber }) => ({
      path,
      manufacturer: manufacturer ?? null,
      serialNumber: serialNumber ?? null,
    }))
    .sort((a, b) => a.path.localeCompare(b.path));
}
