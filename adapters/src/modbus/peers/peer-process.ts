import { type ChildProcess, spawn } from 'node:child_process';
import { once } from 'node:events';
import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { createInterface } from 'node:readline';
import { fileURLToPath } from 'node:url';

/** A server that nobody here wrote, as a process of its own. */
export interface PeerProcess {
  /** What it printed after "ready". */
  readonly said: string;
  stop(): Promise<void>;
}

/** A C program compiled against libmodbus, in a folder of its own. */
export interface CompiledPeer {
  readonly path: string;
  remove(): Promise<void>;
}

const sourceOf = (name: string): string => fileURLToPath(new URL(`./${name}`, import.meta.url));

async function runToEnd(command: string, args: string[]): Promise<void> {
  const child = spawn(command, args, { stdio: ['ignore', 'inherit', 'inherit'] });
  const [code] = (await once(child, 'exit')) as [number | null];
  if (code !== 0) throw new Error(`${command} ended with ${code}`);
}

/** Needs gcc and the package libmodbus-dev; `npm test` installs them. */
export async function compilePeer(name: string): Promise<CompiledPeer> {
  const folder = await mkdtemp(join(tmpdir(), 'cresthold-peer-'));
  const path = join(folder, 'peer');
  await runToEnd('gcc', ['-O2', '-Wall', '-Werror', '-o', path, sourceOf(name), '-lmodbus']);
  return { path, remove: () => rm(folder, { recursive: true, force: true }) };
}

/** Debian's own Python, which has the Debian packages. */
export const pymodbusServer: readonly string[] = ['/usr/bin/python3', sourceOf('pymodbus_server.py')];

/** Starts a server and waits until it says that it is ready. */
export async function startPeer(command: readonly string[], args: readonly string[]): Promise<PeerProcess> {
  const [program = '', ...before] = command;
  const child = spawn(program, [...before, ...args], { stdio: ['pipe', 'pipe', 'inherit'] });
  const ended = once(child, 'exit');
  return {
    said: await readyLine(child),
    async stop() {
      child.kill('SIGKILL');
      await ended;
    },
  };
}

async function readyLine(child: ChildProcess): Promise<string> {
  if (!child.stdout) throw new Error('the server has no output');
  for await (const line of createInterface({ input: child.stdout })) {
    if (line.startsWith('ready')) return line.slice('ready'.length).trim();
  }
  throw new Error('the server ended before it was ready');
}
