import { slewPeriodsAtMost } from '../../envelopes/guard.js';
import type { SequencerInput } from '../sequencer.types.js';
import type { StepServices } from './step-runner.js';

type Reach = Pick<StepServices, 'periodS' | 'limitOf' | 'gridStepOf'>;

/**
 * The value nearest to `wanted` that can be applied in this scan: within slew limit times dt of what is
 * applied, and half a step of the wire's grid more, which is rounding. After a gap the guard lets no lost
 * time be made up; asking for it would only call it.
 *
 * @returns a value inside the envelope, channel unit; `wanted` where nothing is known of the actuator
 * @realtime safe
 */
export function withinReach(services: Reach, input: SequencerInput, channel: string, wanted: number): number {
  const limit = services.limitOf(channel);
  const applied = input.applied(channel);
  if (!limit || !Number.isFinite(applied)) return wanted;
  const reach = slewReach(services, input, channel);
  const reached = Math.min(Math.max(wanted, applied - reach), applied + reach);
  return Math.min(Math.max(reached, limit.min), limit.max);
}

/** Greatest distance from what is applied that this scan may ask for, channel unit. */
export function slewReach(services: Reach, input: SequencerInput, channel: string): number {
  const slewPerS = services.limitOf(channel)?.slewPerS ?? Infinity;
  const countedS = Math.min(input.dtS, slewPeriodsAtMost * services.periodS);
  return slewPerS * countedS + services.gridStepOf(channel) / 2;
}
