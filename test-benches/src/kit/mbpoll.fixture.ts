import { execFile } from 'node:child_process';
import { promisify } from 'node:util';

/**
 * Asks a bench by `mbpoll` (libmodbus), a client that nobody here wrote, once.
 *
 * @param args as on its command line, without host, port and unit
 * @param values to write; none to read
 * @returns values by their address
 */
export async function mbpoll(
  port: number,
  args: string[],
  values: number[] = [],
): Promise<Map<number, number>> {
  const common = ['-m', 'tcp', '-p', String(port), '-a', '1', '-0', '-1', '-q', ...args];
  const words = values.map(String);
  const { stdout } = await promisify(execFile)('mbpoll', [...common, '127.0.0.1', ...words]);
  const read = stdout.matchAll(/^\[(\d+)\]:\s+(\S+)/gm);
  return new Map(Array.from(read, ([, address, value]) => [Number(address), Number(value)]));
}
