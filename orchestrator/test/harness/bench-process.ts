import { execFileSync, fork } from 'node:child_process';
import { once } from 'node:events';
import { existsSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import type { Scenario } from '@cresthold/shared';

const dist = join(__dirname, '../../../test-benches/dist');

/** One line of the bench's own log. */
export type BenchLogLine = { atMs: number; benchS: number } & (
  | { event: 'write'; unit: number; register: number; value: number; engineering: number }
  | { event: 'watchdog'; isTripped: boolean; count: number }
  | {
      event: 'truth';
      efficiency: number | null;
      bestEfficiency: number;
      bestTrim: number;
      trim: number;
    }
);

/** Register of the air trim, as the bench documents it. */
export const airTrimRegister = 0;

export interface BenchProcess {
  readonly port: number;
  log(): BenchLogLine[];
  end(): Promise<void>;
}

/** Forks the built burner bench: its own process, its own log of what was written to it. */
export async function forkBurnerBench(folder: string, args: string[] = []): Promise<BenchProcess> {
  const program = join(dist, 'burner/main.js');
  if (!existsSync(program)) throw new Error(`${program} is missing: build the workspaces first.`);
  const logFile = join(folder, 'bench.log');
  const child = fork(program, ['--port', '0', '--log', logFile, ...args], { execArgv: [], silent: true });
  const [{ port }] = (await once(child, 'message')) as [{ port: number }];
  return {
    port,
    // The last line may still be on its way.
    log: () =>
      readFileSync(logFile, 'utf8')
        .split('\n')
        .slice(0, -1)
        .map((line) => JSON.parse(line) as BenchLogLine),
    async end() {
      const exit = once(child, 'exit');
      child.kill('SIGTERM');
      await exit;
    },
  };
}

/** The documents of the demo scenario for a bench at this port, as its own program prints them. */
export function demoScenario(benchPort: number): Scenario {
  const args = [join(dist, 'demo/print-scenario.js'), '--bench-port', String(benchPort)];
  return JSON.parse(execFileSync(process.execPath, args, { encoding: 'utf8' })) as Scenario;
}
