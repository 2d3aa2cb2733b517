import { getEventListeners } from 'node:events';
import { readdirSync } from 'node:fs';
import { setFlagsFromString } from 'node:v8';
import { runInNewContext } from 'node:vm';

/** What a process holds that a leak adds to, by name. */
export type ProcessUsage = Record<string, number>;

/** @param signal the signal that every opening was given */
export function processUsage(signal: AbortSignal): ProcessUsage {
  const usage: ProcessUsage = {
    'listeners of the abort signal': getEventListeners(signal, 'abort').length,
    'listeners of the process': process
      .eventNames()
      .reduce((sum, name) => sum + process.listenerCount(name), 0),
    'open files': openFiles(),
  };
  for (const type of process.getActiveResourcesInfo()) usage[type] = (usage[type] ?? 0) + 1;
  return usage;
}

/** What has grown, in words; timers of the test runner itself come and go and are left out. */
export function growthOf(before: ProcessUsage, after: ProcessUsage): string[] {
  return Object.entries(after)
    .filter(([name, count]) => count > (before[name] ?? 0) && !ownOfRunner.has(name))
    .map(([name, count]) => `${name}: ${before[name] ?? 0} before, ${count} after`);
}

const ownOfRunner = new Set([
  'Immediate',
  'TTYWrap',
  'PipeWrap',
  'FSReqPromise',
  'FSReqCallback',
  'MessagePort',
]);

/** Bytes in use after a collection. */
export function bytesInUse(): number {
  collectGarbage();
  const { heapUsed, external } = process.memoryUsage();
  return heapUsed + external;
}

function collectGarbage(): void {
  setFlagsFromString('--expose-gc');
  const collect = runInNewContext('gc') as () => void;
  collect();
  collect();
}

/** Zero where the system does not tell. */
function openFiles(): number {
  try {
    return readdirSync('/proc/self/fd').length;
  } catch {
    return 0;
  }
}
