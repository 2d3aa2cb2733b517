import type { BenchModel } from './bench-model.js';

/** @returns a check that tells of each change of the watchdog, once */
export function watchWatchdog(
  model: BenchModel,
  told: (isTripped: boolean, count: number) => void,
): () => void {
  let wasTripped = model.watchdog.isTripped;
  return () => {
    const { isTripped, count } = model.watchdog;
    if (isTripped === wasTripped) return;
    wasTripped = isTripped;
    told(isTripped, count);
  };
}
