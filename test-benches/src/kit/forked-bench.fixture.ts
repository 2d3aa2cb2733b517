import { fork, type ChildProcess } from 'node:child_process';
import { existsSync } from 'node:fs';
import { once } from 'node:events';
import { fileURLToPath } from 'node:url';

export interface ForkedBench {
  readonly child: ChildProcess;
  /** Of a bench on TCP, else 0. */
  readonly port: number;
  /** Of a bench on a serial line, else empty. */
  readonly path: string;
  /** Ends the bench and waits for it. */
  end(): Promise<number | null>;
}

/** The built program of a bench. */
export function benchProgram(name: string): string {
  return fileURLToPath(new URL(`../../dist/${name}/main.js`, import.meta.url));
}

/** Starts a built bench as a process of its own. */
export async function forkBench(name: string, args: string[]): Promise<ForkedBench> {
  const program = benchProgram(name);
  if (!existsSync(program)) throw new Error(`${program} is missing: run "npm run build:types" first.`);
  const child = fork(program, args, { silent: true });
  const [message] = (await once(child, 'message')) as [{ event: string; port?: number; path?: string }];
  return {
    child,
    port: message.port ?? 0,
    path: message.path ?? '',
    async end() {
      const exit = once(child, 'exit') as Promise<[number | null]>;
      if (child.exitCode === null) child.kill('SIGTERM');
      else return child.exitCode;
      return (await exit)[0];
    },
  };
}
