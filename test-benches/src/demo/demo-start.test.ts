import { execFile, spawn, type ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import { mkdtempSync, rmSync } from 'node:fs';
import { createServer, type AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { promisify } from 'node:util';
import { afterAll, describe, expect, it } from 'vitest';

const script = fileURLToPath(new URL('../../scripts/demo.mjs', import.meta.url));
const folder = mkdtempSync(join(tmpdir(), 'cresthold-demo-test-'));
const data = join(folder, 'data');
const started: ChildProcess[] = [];
afterAll(() => {
  // Where a test failed half-way; the programs of a killed demo end by themselves.
  for (const child of started) if (child.exitCode === null) child.kill('SIGKILL');
  rmSync(folder, { recursive: true, force: true });
});

async function freePort(): Promise<number> {
  const probe = createServer().listen(0, '127.0.0.1');
  await once(probe, 'listening');
  const { port } = probe.address() as AddressInfo;
  probe.close();
  return port;
}

interface RunningDemo {
  child: ChildProcess;
  exited: Promise<number | null>;
  /** What it has printed. */
  text: () => string;
}

function startDemo(...args: string[]): RunningDemo {
  const child = spawn(process.execPath, [script, '--as-built', '--data', data, ...args]);
  started.push(child);
  let text = '';
  for (const stream of [child.stdout, child.stderr]) stream.on('data', (part) => (text += String(part)));
  const exited = once(child, 'exit').then(([code]) => code as number | null);
  return { child, exited, text: () => text };
}

async function untilPrinted(demo: RunningDemo, what: string): Promise<void> {
  while (!demo.text().includes(what)) {
    if (demo.child.exitCode !== null) throw new Error(`The demo ended: ${demo.text()}`);
    await once(demo.child.stdout!, 'data');
  }
}

/** Process ids below one, children of children included. */
async function descendants(pid: number): Promise<number[]> {
  const { stdout } = await promisify(execFile)('ps', ['-eo', 'pid=,ppid=']);
  const pairs = stdout
    .trim()
    .split('\n')
    .map((line) => line.trim().split(/\s+/).map(Number));
  const below = (parent: number): number[] =>
    pairs.filter(([, ppid]) => ppid === parent).flatMap(([child = 0]) => [child, ...below(child)]);
  return below(pid);
}

function isAlive(pid: number): boolean {
  try {
    process.kill(pid, 0);
    return true;
  } catch {
    return false;
  }
}

describe('the demo', () => {
  it('has a seeking run going, and leaves nothing running after an interrupt', async () => {
    const [port, benchPort] = [await freePort(), await freePort()];
    const demo = startDemo('--port', String(port), '--bench-port', String(benchPort));
    await untilPrinted(demo, 'Ctrl-C ends all of it.');
    expect(demo.text()).toMatch(/A seeking run is under way: http:\S+\/runs\/\S+/);
    expect(demo.text()).toMatch(/engineer +\S{8,}/);
    expect((await fetch(`http://127.0.0.1:${port}/api/v1/health`)).status).toBe(200);
    const pids = await descendants(demo.child.pid!);
    // Benches on TCP, a rig host for each, the server; two more of both where socat is there.
    expect(pids.length).toBeGreaterThanOrEqual(9);

    demo.child.kill('SIGINT');
    expect(await demo.exited).toBe(0);
    expect(pids.filter(isAlive)).toEqual([]);
  }, 120_000);

  it('goes on with its data and shows no password again, nor leaves the server behind when it is killed', async () => {
    const demo = startDemo('--port', String(await freePort()));
    await untilPrinted(demo, 'Ctrl-C ends all of it.');
    expect(demo.text()).toContain('A seeking run is under way');
    expect(demo.text()).toContain('shown at the first start');
    const pids = await descendants(demo.child.pid!);
    demo.child.kill('SIGKILL');
    await demo.exited;
    await expect.poll(() => pids.filter(isAlive), { timeout: 60_000, interval: 200 }).toEqual([]);
  }, 150_000);

  it('says which port is in use', async () => {
    const other = createServer().listen(0, '127.0.0.1');
    await once(other, 'listening');
    const { port } = other.address() as AddressInfo;
    const demo = startDemo('--port', String(port));
    expect(await demo.exited).toBe(1);
    expect(demo.text()).toContain(`Port ${port} for the server is in use`);
    other.close();
  }, 30_000);
});
