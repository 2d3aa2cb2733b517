import { execFile } from 'node:child_process';
import { promisify } from 'node:util';

/** How mbpoll (P. Jean), a Modbus master that nobody here wrote, calls what it reads. */
const mbpollTypes = {
  'discrete-input': '1',
  'input-register': '3',
  'holding-register': '4',
  'input-float': '3:float',
} as const;

export interface MbpollRequest {
  /** Options that say how the device is reached: `-m tcp -p 502`, or `-m rtu -b 19200 -P even`. */
  readonly wire: readonly string[];
  /** Address of a TCP device, or path of a serial port. */
  readonly device: string;
  readonly unit: number;
  readonly type: keyof typeof mbpollTypes;
  /** As in the protocol, from 0. */
  readonly address: number;
}

function run({ wire, device, unit, type, address }: MbpollRequest, more: string[], values: string[]) {
  const options = ['-a', String(unit), '-t', mbpollTypes[type], '-r', String(address), '-0', '-1', '-q'];
  return promisify(execFile)('mbpoll', [...wire, ...options, ...more, device, ...values]);
}

/**
 * Reads once, over either Modbus; floats with the high word first.
 *
 * @returns values in the order of their addresses
 * @throws where mbpoll got no answer or an exception
 */
export async function mbpollRead(request: MbpollRequest, count: number): Promise<number[]> {
  const { stdout } = await run(request, ['-B', '-c', String(count)], []);
  const lines = [...stdout.matchAll(/^\[\d+\]:\s+(\S+)/gm)];
  if (lines.length !== count) throw new Error(`mbpoll read ${lines.length} of ${count} values:\n${stdout}`);
  return lines.map(([, value]) => Number(value));
}

/** Writes one value once. */
export async function mbpollWrite(request: MbpollRequest, value: number): Promise<void> {
  await run(request, [], [String(value)]);
}
