import type { StepOf } from '../experiment.schema.js';
import type { PreflightCase } from './fault-list.js';
import { checkSeekDithers } from './seek-dithers.js';
import { checkSeekLaw } from './seek-law.js';
import { checkSeekLimits } from './seek-limits.js';
import { checkSeekTiming } from './seek-timing.js';
import { checkWideSearch } from './seek-wide-search.js';

export type Seek = StepOf<'seek'>;

/** Law, actuators, dithers and times of every Seek, as far as they are known before the run. */
export function checkSeeks(c: PreflightCase): void {
  for (const step of c.graph.steps) {
    if (step.kind !== 'seek') continue;
    checkSeekLaw(c, step);
    checkSeekLimits(c, step);
    checkSeekTiming(c, step);
    checkSeekDithers(c, step);
    checkWideSearch(c, step);
  }
}
