import { setFlagsFromString } from 'node:v8';
import { runInNewContext } from 'node:vm';

/** What an act leaves on the heap, bytes; what was left lying before is none of it. */
export function heapGrowthOf(act: () => unknown): number {
  collectGarbage();
  const before = process.memoryUsage().heapUsed;
  act();
  return process.memoryUsage().heapUsed - before;
}

function collectGarbage(): void {
  setFlagsFromString('--expose-gc');
  const collect = runInNewContext('gc') as () => void;
  collect();
}
