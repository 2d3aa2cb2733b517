import type { DueState } from './dto/calibration.dto.js';

const soonDays = 30;
const dayMs = 86_400_000;

/**
 * How near its end a calibration is. The day it falls due is its first day overdue, in UTC.
 *
 * @param dueOn ISO date, or null where it does not expire
 */
export function dueStateOf(dueOn: string | null, nowMs: number): DueState {
  if (dueOn === null) return 'current';
  const leftMs = Date.parse(`${dueOn}T00:00:00Z`) - nowMs;
  if (leftMs <= 0) return 'overdue';
  return leftMs <= soonDays * dayMs ? 'due-soon' : 'current';
}
