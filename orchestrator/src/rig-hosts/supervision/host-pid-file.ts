import { existsSync, mkdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { dirname } from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import { DomainError } from '@cresthold/shared';

interface Entry {
  pid: number;
  /** When the process began, in the system's own count: tells it from a later one with the same number. */
  began: string | null;
}

const pollMs = 100;

/** Which process owns a rig, kept on disk: the host of a server that died is not forgotten by the next one. */
export class HostPidFile {
  constructor(private readonly path: string) {}

  write(pid: number): void {
    mkdirSync(dirname(this.path), { recursive: true });
    writeFileSync(this.path, JSON.stringify({ pid, began: processBegan(pid) } satisfies Entry));
  }

  remove(): void {
    rmSync(this.path, { force: true });
  }

  /**
   * Waits until the process that was written is gone: two owners of one wire would be a danger.
   *
   * @throws host.unavailable when it is still there after `boundMs`
   */
  async waitUntilGone(boundMs: number, signal: AbortSignal): Promise<void> {
    const entry = this.read();
    if (!entry) return;
    const deadlineMs = performance.now() + boundMs;
    while (isAlive(entry)) {
      if (performance.now() > deadlineMs) {
        const text = `An earlier rig host, process ${entry.pid}, still owns the rig: end it first.`;
        throw new DomainError('host.unavailable', text);
      }
      await sleep(pollMs, undefined, { signal });
    }
    this.remove();
  }

  private read(): Entry | null {
    if (!existsSync(this.path)) return null;
    try {
      const entry = JSON.parse(readFileSync(this.path, 'utf8')) as Partial<Entry>;
      return typeof entry.pid === 'number' ? { pid: entry.pid, began: entry.began ?? null } : null;
    } catch {
      // Torn by a crash in mid-write: the process it would have named had not been told to do anything yet.
      return null;
    }
  }
}

function isAlive(entry: Entry): boolean {
  try {
    process.kill(entry.pid, 0);
  } catch (error) {
    return (error as NodeJS.ErrnoException).code === 'EPERM';
  }
  const stat = processStat(entry.pid);
  if (stat === null) return true;
  return stat.state !== 'Z' && (entry.began === null || stat.began === entry.began);
}

function processBegan(pid: number): string | null {
  return processStat(pid)?.began ?? null;
}

/** State and start time of a process where the system has /proc (Linux, proc_pid_stat(5), fields 3 and 22). */
function processStat(pid: number): { state: string; began: string } | null {
  try {
    const text = readFileSync(`/proc/${pid}/stat`, 'utf8');
    const fields = text.slice(text.lastIndexOf(')') + 2).split(' ');
    return { state: fields[0] ?? '', began: fields[19] ?? '' };
  } catch {
    return null;
  }
}
