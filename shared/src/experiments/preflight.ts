import type { PreflightFault } from './preflight.types.js';
import { checkChannels } from './preflight/channels.js';
import { checkExpressions } from './preflight/expressions.js';
import { FaultList, type PreflightInput } from './preflight/fault-list.js';
import { checkLimits } from './preflight/limits.js';
import { checkSeeks } from './preflight/seek.js';
import { checkStructure } from './preflight/structure.js';
import { checkUnits } from './preflight/units.js';
import { orderSteps } from './step-order.js';

export type { PreflightInput } from './preflight/fault-list.js';

/**
 * Every fault of an experiment that can be known before it runs, with where it is and what to do. Errors
 * forbid a run; warnings are recorded with it. Never throws for a graph that the schema accepts.
 */
export function preflight(input: PreflightInput): PreflightFault[] {
  const found = { ...input, order: orderSteps(input.graph), faults: new FaultList() };
  checkStructure(found);
  checkChannels(found);
  checkExpressions(found);
  checkLimits(found);
  checkSeeks(found);
  checkUnits(found);
  return found.faults.faults;
}
