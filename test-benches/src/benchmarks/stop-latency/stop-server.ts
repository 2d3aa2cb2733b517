import { execFile, spawn } from 'node:child_process';
import { once } from 'node:events';
import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { createInterface } from 'node:readline';
import { fileURLToPath } from 'node:url';
import { promisify } from 'node:util';
import type { Scenario } from '@cresthold/shared';
import { z } from 'zod';

const orchestrator = fileURLToPath(new URL('../../../../orchestrator/dist/', import.meta.url));
const loadedSchema = z.object({
  users: z.array(z.object({ account: z.string(), password: z.string() })),
  rigs: z.array(z.object({ id: z.string(), experiments: z.record(z.string(), z.string()) })),
});

export interface StopServer {
  readonly url: string;
  readonly loaded: z.infer<typeof loadedSchema>;
  end(): Promise<void>;
}

/** The real server on a fresh data folder with a scenario in it, as a process of its own. */
export async function startStopServer(scenario: Scenario): Promise<StopServer> {
  const folder = await mkdtemp(join(tmpdir(), 'cresthold-stop-latency-'));
  const file = join(folder, 'scenario.json');
  await writeFile(file, JSON.stringify(scenario));
  const env = { ...process.env, CRESTHOLD_DATA: join(folder, 'data'), CRESTHOLD_PORT: '0' };
  const { stdout } = await promisify(execFile)(
    process.execPath,
    [join(orchestrator, 'load-scenario.js'), file],
    { env },
  );
  const server = spawn(process.execPath, [join(orchestrator, 'main.js')], {
    env: { ...env, NODE_ENV: 'production' },
    stdio: ['ignore', 'pipe', 'inherit'],
  });
  const url = await new Promise<string>((resolve, reject) => {
    server.once('exit', (code) => reject(new Error(`The server ended with ${code}.`)));
    createInterface({ input: server.stdout }).on('line', (line) => {
      const address = /Cresthold listens at (\S+)/.exec(line)?.[1];
      if (address !== undefined) resolve(address);
    });
  });
  return {
    url,
    loaded: loadedSchema.parse(JSON.parse(stdout)),
    async end() {
      const ended = once(server, 'exit');
      server.kill('SIGTERM');
      await ended;
      await rm(folder, { recursive: true, force: true });
    },
  };
}

/** One person at the API. */
export class StopPerson {
  private constructor(
    private readonly url: string,
    private readonly password: string,
    public cookie: string,
  ) {}

  static async signIn({ url, loaded }: StopServer, account: string): Promise<StopPerson> {
    const password = loaded.users.find((user) => user.account === account)?.password ?? '';
    const person = new StopPerson(url, password, '');
    await person.takeCookie('auth/sign-in', { account, password });
    return person;
  }

  /** Acts that need the password again are taken for the next minutes. */
  async reauthenticate(): Promise<void> {
    await this.takeCookie('auth/reauthenticate', { password: this.password });
  }

  /** @returns whether it was accepted */
  async post(path: string, body: object = {}): Promise<boolean> {
    const response = await this.send(path, body).catch(() => null);
    await response?.arrayBuffer();
    return response?.ok === true;
  }

  private async takeCookie(path: string, body: object): Promise<void> {
    const response = await this.send(path, body);
    const text = await response.text();
    if (!response.ok) throw new Error(`POST ${path}: ${text}`);
    this.cookie = (response.headers.get('set-cookie') ?? '').split(';')[0] ?? '';
  }

  private send(path: string, body: object): Promise<Response> {
    const headers = { 'content-type': 'application/json', cookie: this.cookie };
    return fetch(`${this.url}/api/v1/${path}`, { method: 'POST', headers, body: JSON.stringify(body) });
  }
}
