import { slewPeriodsAtMost } from '../../envelopes/guard.js';
import type { SequencerInput } from '../sequencer.types.js';
import type { StepServices } from './step-runner.js';
import { slewReach, withinReach } from './within-reach.js';

/**
 * Follows the estimate of a law, but never in jumps: a retreat puts the estimate back at once, and takes the
 * dither out or in; a scan that comes late leaves a gap. The way there is walked at the slew limit; a dither that is by itself faster than that is
 * left to the guard, which counts it.
 */
export class SeekCatchUp {
  private isBehind = false;
  private before = NaN;
  private wasValid = true;

  constructor(
    private readonly services: StepServices,
    private readonly channel: string,
  ) {}

  /** @returns the base to ask for together with `dither`, channel unit */
  follow(input: SequencerInput, estimate: number, dither: number, isValid: boolean): number {
    const reach = slewReach(this.services, input, this.channel);
    const isAfterGap = input.dtS > slewPeriodsAtMost * this.services.periodS;
    const isJump = isValid !== this.wasValid || Math.abs(estimate - this.before) > reach;
    if (isAfterGap || isJump) this.isBehind = true;
    this.wasValid = isValid;
    this.before = estimate;
    if (!this.isBehind) return estimate;
    const wanted = estimate + dither;
    const reached = withinReach(this.services, input, this.channel, wanted);
    this.isBehind = reached !== wanted;
    if (!this.isBehind) return estimate;
    // The sum is inside the envelope; the base must be so by itself, or the guard has to hold it.
    const { min = -Infinity, max = Infinity } = this.services.limitOf(this.channel) ?? {};
    return Math.min(Math.max(reached - dither, min), max);
  }
}
