import { slewPeriodsAtMost } from '../../envelopes/guard.js';
import { ditherWithin, held } from '../../seeking/seek-box.js';
import type { SequencerInput } from '../sequencer.types.js';
import type { StepServices } from './step-runner.js';
import { slewReach, withinReach } from './within-reach.js';

/** Share of an actuator's range within which it stands where it was sent to. */
const rangeSlack = 1e-9;

/** What a law wants of its actuators, actuator units. */
export interface Wanted {
  readonly estimate: Float64Array;
  readonly dither: Float64Array;
  readonly isRetreated: boolean;
}

/**
 * Follows the estimates of a law, but never in jumps: a retreat puts the estimates back at once, a wide search sends
 * them across the box, a square dither changes sides, a scan that comes late leaves a gap, and in a pause the
 * actuators went to their bases. Nothing further than the slew limit allows is ever asked for. On a way back all
 * actuators go together and arrive together, so that the way is a straight one.
 */
export class SeekCatchUp {
  /** On a way that takes more than one scan. */
  isBehind = false;
  private readonly before: Float64Array;
  /** What was asked for last, actuator units; NaN before the first time. */
  private readonly asked: Float64Array;
  private wasRetreated = false;

  constructor(
    private readonly services: StepServices,
    private readonly channels: readonly string[],
  ) {
    this.before = new Float64Array(channels.length).fill(NaN);
    this.asked = new Float64Array(channels.length).fill(NaN);
  }

  /** Whether an actuator is not where it was sent to, as after a pause. */
  isDisplaced(input: SequencerInput): boolean {
    return this.channels.some((channel, i) => {
      const { min = 0, max = 0 } = this.services.limitOf(channel) ?? {};
      const slack = this.services.gridStepOf(channel) * 1.001 + (max - min) * rangeSlack;
      return Math.abs(input.applied(channel) - (this.asked[i] as number)) > slack;
    });
  }

  /** Asks for what comes nearest to what is wanted. */
  follow(input: SequencerInput, wanted: Wanted): void {
    const { estimate, isRetreated } = wanted;
    const isAfterGap = input.dtS > slewPeriodsAtMost * this.services.periodS;
    if (isAfterGap || isRetreated !== this.wasRetreated || this.hasJumped(input, estimate))
      this.isBehind = true;
    const share = this.isBehind ? this.shareInReach(input, wanted) : 1;
    this.isBehind = share < 1;
    this.wasRetreated = isRetreated;
    this.before.set(estimate);
    for (let i = 0; i < this.channels.length; i += 1) this.ask(input, wanted, i, share);
  }

  private hasJumped(input: SequencerInput, estimate: Float64Array): boolean {
    const isDisplaced = this.isDisplaced(input);
    return (
      isDisplaced ||
      this.channels.some(
        (channel, i) =>
          Math.abs((estimate[i] as number) - (this.before[i] as number)) >
          slewReach(this.services, input, channel),
      )
    );
  }

  /** The share of the whole way that every actuator can go in this scan; 1 where all can arrive. */
  private shareInReach(input: SequencerInput, { estimate, dither }: Wanted): number {
    return this.channels.reduce((share, channel, i) => {
      const way = Math.abs((estimate[i] as number) + (dither[i] as number) - input.applied(channel));
      const reach = slewReach(this.services, input, channel);
      return way > reach ? Math.min(share, reach / way) : share;
    }, 1);
  }

  private ask(input: SequencerInput, { estimate, dither }: Wanted, i: number, share: number): void {
    const { services } = this;
    const channel = this.channels[i] as string;
    const middle = estimate[i] as number;
    const swing = dither[i] as number;
    const applied = input.applied(channel);
    const goal = middle + swing;
    const target = share < 1 && Number.isFinite(applied) ? applied + share * (goal - applied) : goal;
    const reached = withinReach(services, input, channel, target);
    if (reached === goal) {
      services.request(channel, middle, swing);
      this.asked[i] = goal;
      return;
    }
    // What is missing is taken from the dither first, then from the base: both stay inside the envelope so.
    const { min = -Infinity, max = Infinity } = services.limitOf(channel) ?? {};
    const part = held(reached - middle, -Math.abs(swing), Math.abs(swing));
    const base = held(reached - part, min, max);
    const rest = ditherWithin(base, part, min, max);
    services.request(channel, base, rest);
    this.asked[i] = base + rest;
  }
}
