import { execFileSync, fork, type ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join, resolve } from 'node:path';
import { scenarioSchema, type Scenario } from '@cresthold/shared';

const root = resolve(import.meta.dirname, '../..');

/** A line of the bench's own log. */
export type BenchLine = { atMs: number; benchS: number } & (
  | { event: 'write'; unit: number; register: number; value: number; engineering: number }
  | { event: 'watchdog'; isTripped: boolean; count: number }
  | { event: 'truth'; efficiency: number | null; bestEfficiency: number; bestTrim: number; trim: number }
);

/** What the scenario loader printed. */
interface LoadedScenario {
  users: { account: string; password: string }[];
  rigs: { id: string; experiments: Record<string, string> }[];
}

/** The whole product: real server process, real bench process, a data folder of its own. */
export class Product {
  private constructor(
    private readonly folder: string,
    private readonly bench: ChildProcess,
    private readonly server: ChildProcess,
    readonly url: string,
    private readonly output: { text: string },
    /** Documents of the demo scenario, for this bench. */
    readonly scenario: Scenario,
    /** Accounts and ids where the scenario was loaded, else null. */
    readonly loaded: LoadedScenario | null,
  ) {}

  /**
   * @param benchOptions as in test-benches/README.md
   * @param isScenarioLoaded begins with people, rig and documents of the demo instead of an empty folder
   */
  static async start(benchOptions: string[], isScenarioLoaded = false): Promise<Product> {
    const folder = mkdtempSync(join(tmpdir(), 'cresthold-e2e-'));
    const bench = fork(
      join(root, 'test-benches/dist/burner/main.js'),
      ['--port', '0', '--log', join(folder, 'bench.log'), ...benchOptions],
      { execArgv: [], silent: true },
    );
    const [{ port }] = (await once(bench, 'message')) as [{ port: number }];
    const printer = join(root, 'test-benches/dist/demo/print-scenario.js');
    const text = execFileSync(process.execPath, [printer, '--bench-port', String(port)], {
      encoding: 'utf8',
    });
    const scenario = scenarioSchema.parse(JSON.parse(text));
    const env = {
      ...process.env,
      CRESTHOLD_DATA: join(folder, 'data'),
      CRESTHOLD_PORT: '0',
      NODE_ENV: 'production',
    };
    const loaded = isScenarioLoaded ? loadScenario(folder, text, env) : null;
    const server = fork(join(root, 'orchestrator/dist/main.js'), [], { execArgv: [], silent: true, env });
    const output = { text: '' };
    server.stdout?.on('data', (data: Buffer) => (output.text += data.toString()));
    server.stderr?.on('data', (data: Buffer) => (output.text += data.toString()));
    const url = await printed(server, output, /Cresthold listens at (\S+)/);
    return new Product(folder, bench, server, url, output, scenario, loaded);
  }

  /** The one-time code that the server prints where no account exists. */
  setUpCode(): Promise<string> {
    return printed(this.server, this.output, /Set-up code for the first administrator: (\S+)/);
  }

  passwordOf(account: string): string {
    const password = this.loaded?.users.find((user) => user.account === account)?.password;
    if (password === undefined) throw new Error(`The scenario made no account "${account}".`);
    return password;
  }

  /** What the bench wrote down by itself, without the line that may still be on its way. */
  benchLog(): BenchLine[] {
    return readFileSync(join(this.folder, 'bench.log'), 'utf8')
      .split('\n')
      .slice(0, -1)
      .map((line) => JSON.parse(line) as BenchLine);
  }

  async end(): Promise<void> {
    for (const child of [this.server, this.bench]) {
      if (child.exitCode !== null || child.signalCode !== null) continue;
      const exit = once(child, 'exit');
      child.kill('SIGTERM');
      await exit;
    }
    rmSync(this.folder, { recursive: true, force: true });
  }
}

function loadScenario(folder: string, text: string, env: NodeJS.ProcessEnv): LoadedScenario {
  const file = join(folder, 'scenario.json');
  writeFileSync(file, text);
  const loader = join(root, 'orchestrator/dist/load-scenario.js');
  const printedText = execFileSync(process.execPath, [loader, file], { encoding: 'utf8', env });
  return JSON.parse(printedText) as LoadedScenario;
}

async function printed(child: ChildProcess, output: { text: string }, pattern: RegExp): Promise<string> {
  const endMs = performance.now() + 40_000;
  for (;;) {
    const match = pattern.exec(output.text)?.[1];
    if (match !== undefined) return match;
    if (child.exitCode !== null || performance.now() > endMs) {
      throw new Error(`The server did not print ${String(pattern)}:\n${output.text}`);
    }
    await new Promise((done) => setTimeout(done, 50));
  }
}
