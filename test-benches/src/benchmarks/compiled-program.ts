import { type ChildProcess, spawn } from 'node:child_process';
import { once } from 'node:events';
import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { createInterface } from 'node:readline';
import { fileURLToPath } from 'node:url';

/** Where the sources of the benchmarks lie, seen from the built program. */
const sources = fileURLToPath(new URL('../../src/benchmarks/', import.meta.url));

/** A C program in a folder of its own. */
export interface CompiledProgram {
  readonly path: string;
  remove(): Promise<void>;
}

/**
 * Compiles a C source of the benchmarks with gcc.
 *
 * @throws where gcc or a library is missing, with the packages to install
 */
export async function compileProgram(source: string, libraries: string[] = []): Promise<CompiledProgram> {
  const folder = await mkdtemp(join(tmpdir(), 'cresthold-benchmark-'));
  const path = join(folder, 'program');
  const links = libraries.map((library) => `-l${library}`);
  const compiler = spawn('gcc', ['-O2', '-o', path, join(sources, source), ...links], {
    stdio: ['ignore', 'ignore', 'inherit'],
  });
  const code = await exitCode(compiler);
  if (code !== 0) throw new Error(`gcc did not compile ${source}: install gcc, libc6-dev and libmodbus-dev.`);
  return { path, remove: () => rm(folder, { recursive: true, force: true }) };
}

async function exitCode(child: ChildProcess): Promise<number | null> {
  try {
    const [code] = (await once(child, 'exit')) as [number | null];
    return code;
  } catch {
    return null;
  }
}

/** A program that has said "ready", and what it said behind that. */
export interface ReadyProgram {
  readonly said: string[];
  stop(): Promise<void>;
}

export async function startProgram(path: string, args: string[]): Promise<ReadyProgram> {
  const child = spawn(path, args, { stdio: ['ignore', 'pipe', 'inherit'] });
  const ended = once(child, 'exit');
  const [ready, ...said] = (await firstLine(child)).split(' ');
  if (ready !== 'ready') throw new Error(`${path} ended before it was ready.`);
  return {
    said,
    async stop() {
      child.kill('SIGKILL');
      await ended;
    },
  };
}

/** Runs a program to its end. @returns its first line */
export function firstLineOf(path: string, args: string[]): Promise<string> {
  return firstLine(spawn(path, args, { stdio: ['ignore', 'pipe', 'inherit'] }));
}

async function firstLine(child: ChildProcess): Promise<string> {
  if (!child.stdout) throw new Error('a program without output');
  for await (const line of createInterface({ input: child.stdout })) return line;
  return '';
}
