import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { existsSync } from 'node:fs';
import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';

export interface PtyPair {
  readonly near: string;
  readonly far: string;
  stop(): Promise<void>;
}

/** Two pseudo-terminals joined by socat: what goes into one comes out of the other. They pace nothing. */
export async function startPtyPair(): Promise<PtyPair> {
  const folder = await mkdtemp(join(tmpdir(), 'cresthold-pty-'));
  const [near, far] = [join(folder, 'near'), join(folder, 'far')];
  const ends = [near, far].map((path) => `pty,raw,echo=0,link=${path}`);
  const socat = spawn('socat', ends, { stdio: 'ignore' });
  const ended = once(socat, 'exit');
  for (let turn = 0; !(existsSync(near) && existsSync(far)); turn += 1) {
    if (turn > 2000 || socat.exitCode !== null) throw new Error('socat made no pseudo-terminals');
    await new Promise((resolve) => setTimeout(resolve, 2));
  }
  return {
    near,
    far,
    async stop() {
      if (socat.exitCode === null && socat.signalCode === null) socat.kill();
      await ended;
      await rm(folder, { recursive: true, force: true });
    },
  };
}
