import { fork, type ChildProcess } from 'node:child_process';
import { existsSync } from 'node:fs';
import { once } from 'node:events';
import { fileURLToPath } from 'node:url';

const program = fileURLToPath(new URL('../../dist/burner/main.js', import.meta.url));

export interface ForkedBench {
  readonly child: ChildProcess;
  readonly port: number;
  /** Ends the bench and waits for it. */
  end(): Promise<number | null>;
}

/** Starts the built burner bench as a process of its own. */
export async function forkBench(args: string[]): Promise<ForkedBench> {
  if (!existsSync(program)) throw new Error(`${program} is missing: run "npm run build:types" first.`);
  const child = fork(program, args, { silent: true });
  const [message] = (await once(child, 'message')) as [{ event: string; port: number }];
  return {
    child,
    port: message.port,
    async end() {
      const exit = once(child, 'exit') as Promise<[number | null]>;
      if (child.exitCode === null) child.kill('SIGTERM');
      else return child.exitCode;
      return (await exit)[0];
    },
  };
}
