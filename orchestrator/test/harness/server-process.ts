import { fork, type ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import { existsSync } from 'node:fs';
import { join } from 'node:path';

const program = join(__dirname, '../../dist/main.js');
const startBoundMs = 30_000;

/** The real server as a process of its own, on a port of its own. */
export class ServerProcess {
  private constructor(
    readonly child: ChildProcess,
    readonly url: string,
    /** Everything it printed so far. */
    readonly output: { text: string },
  ) {}

  /** @param env what it is configured with besides */
  static async start(dataFolder: string, env: Record<string, string> = {}): Promise<ServerProcess> {
    if (!existsSync(program)) throw new Error(`${program} is missing: build the workspaces first.`);
    const child = fork(program, [], {
      execArgv: [],
      silent: true,
      env: {
        ...process.env,
        CRESTHOLD_DATA: dataFolder,
        CRESTHOLD_PORT: '0',
        NODE_ENV: 'production',
        ...env,
      },
    });
    const output = { text: '' };
    child.stdout?.on('data', (data: Buffer) => (output.text += data.toString()));
    child.stderr?.on('data', (data: Buffer) => (output.text += data.toString()));
    const url = await printed(child, output, /Cresthold listens at (\S+)/);
    return new ServerProcess(child, url, output);
  }

  /** The code for the first administrator, as the server prints it at its first start. */
  setUpCode(): Promise<string> {
    return printed(this.child, this.output, /Set-up code for the first administrator: (\S+)/);
  }

  lastLines(count: number): string {
    return this.output.text.split('\n').slice(-count).join('\n');
  }

  async end(signal: NodeJS.Signals = 'SIGTERM'): Promise<void> {
    if (this.child.exitCode !== null || this.child.signalCode !== null) return;
    const exit = once(this.child, 'exit');
    this.child.kill(signal);
    await exit;
  }
}

async function printed(child: ChildProcess, output: { text: string }, pattern: RegExp): Promise<string> {
  const endMs = performance.now() + startBoundMs;
  for (;;) {
    const match = pattern.exec(output.text);
    if (match?.[1] !== undefined) return match[1];
    if (child.exitCode !== null || performance.now() > endMs) {
      throw new Error(`The server did not print ${String(pattern)}:\n${output.text}`);
    }
    await new Promise((resolve) => setTimeout(resolve, 20));
  }
}
