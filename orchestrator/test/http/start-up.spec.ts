import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { existsSync, mkdtempSync, rmSync, statSync } from 'node:fs';
import { createServer, type AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { ServerProcess } from '../harness/server-process.js';

const program = join(__dirname, '../../dist/main.js');

/** Runs the server where it is expected not to start. */
async function failedStart(environment: NodeJS.ProcessEnv): Promise<{ code: number | null; text: string }> {
  if (!existsSync(program)) throw new Error(`${program} is missing: build the workspaces first.`);
  const child = spawn(process.execPath, [program], { env: { ...process.env, ...environment } });
  let text = '';
  child.stderr.on('data', (data: Buffer) => (text += data.toString()));
  const [code] = (await once(child, 'close')) as [number | null];
  return { code, text };
}

// Each start is a whole process; a busy machine takes its time.
jest.setTimeout(120_000);

describe('the server process', () => {
  let folder: string;
  beforeEach(() => {
    folder = mkdtempSync(join(tmpdir(), 'cresthold-start-'));
  });
  afterEach(() => rmSync(folder, { recursive: true, force: true }));

  it('lists all faults of its configuration and does not start', async () => {
    const environment = { CRESTHOLD_DATA: folder, CRESTHOLD_PORT: 'many', CRESTHOLD_PROXIES: '-1' };
    const { code, text } = await failedStart(environment);
    expect(code).toBe(1);
    expect(text).toMatch(/CRESTHOLD_PORT: .+\n\s+CRESTHOLD_PROXIES: /);
  });

  it('says that its port is taken', async () => {
    const taken = createServer().listen(0, '127.0.0.1');
    await once(taken, 'listening');
    const { port } = taken.address() as AddressInfo;
    const { code, text } = await failedStart({ CRESTHOLD_DATA: folder, CRESTHOLD_PORT: String(port) });
    expect([code, text]).toEqual([1, expect.stringContaining('The port is taken')]);
    taken.close();
  });

  it('has its data folder to itself, lets it go even when killed, and ends in order on SIGTERM', async () => {
    const first = await ServerProcess.start(folder);
    try {
      const { code, text } = await failedStart({ CRESTHOLD_DATA: folder, CRESTHOLD_PORT: '0' });
      expect([code, text]).toEqual([1, expect.stringContaining('Another server works on the data folder')]);
      expect(statSync(join(folder, 'sealing-key')).mode & 0o777).toBe(0o600);
    } finally {
      await first.end('SIGKILL');
    }
    const second = await ServerProcess.start(folder);
    await second.end('SIGTERM');
    // SQLite removes its write-ahead log only where the database was closed in order.
    expect(existsSync(join(folder, 'cresthold.sqlite-wal'))).toBe(false);
  });
});
