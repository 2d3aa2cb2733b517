import { fork } from 'node:child_process';
import { once } from 'node:events';
import { mkdtempSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { HostPidFile } from '../../src/rig-hosts/supervision/host-pid-file.js';

const never = new AbortController().signal;

function pidFile() {
  const path = join(mkdtempSync(join(tmpdir(), 'cresthold-pid-')), 'rigs', 'rig-1.pid');
  return { path, file: new HostPidFile(path) };
}

describe('the file that names the owner of a rig', () => {
  it('lets pass where none was written', async () => {
    await expect(pidFile().file.waitUntilGone(0, never)).resolves.toBeUndefined();
  });

  it('refuses while the owner lives, and lets pass once it is gone', async () => {
    const owner = fork(join(__dirname, 'fixtures', 'never-ready.mjs'));
    const { file } = pidFile();
    file.write(owner.pid ?? 0);
    await expect(file.waitUntilGone(150, never)).rejects.toMatchObject({
      code: 'host.unavailable',
      message: expect.stringContaining(`process ${owner.pid}`),
    });
    const waiting = file.waitUntilGone(5_000, never);
    owner.kill('SIGKILL');
    await once(owner, 'exit');
    await expect(waiting).resolves.toBeUndefined();
  });

  it('is not deceived by another process with the same number', async () => {
    const { path, file } = pidFile();
    file.write(process.pid);
    writeFileSync(path, JSON.stringify({ pid: process.pid, began: '1' }));
    await expect(file.waitUntilGone(0, never)).resolves.toBeUndefined();
  });

  it('lets pass when a crash tore it', async () => {
    const { path, file } = pidFile();
    file.write(process.pid);
    writeFileSync(path, '{"pid":');
    await expect(file.waitUntilGone(0, never)).resolves.toBeUndefined();
  });
});
