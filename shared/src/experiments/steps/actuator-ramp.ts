import { slewPeriodsAtMost } from '../../envelopes/guard.js';
import type { SequencerInput } from '../sequencer.types.js';
import type { StepServices } from './step-runner.js';
import { withinReach } from './within-reach.js';

/** Kept under the slew limit by this much, so that rounding does not call the guard. */
const slewMargin = 1 + 1e-6;

/** An actuator that has not arrived this long after it should have will not arrive, s. */
const arrivalGraceS = 5;

/** A line may take this many times as long: a grid that lies badly to the slew limit halves the speed. */
const durationTimesAtMost = 2;

interface Leg {
  channel: string;
  from: number;
  to: number;
}

/** Takes actuators from where they are held to their targets on straight lines, all arriving together. */
export class ActuatorRamp {
  private legs: Leg[] = [];
  private durationS = 0;
  private rampedS = 0;

  constructor(private readonly services: StepServices) {}

  /**
   * @param rampS wanted time, s; longer where a slew limit asks for it
   * @param from where the lines begin: at the held base, or at the applied value where a dither is to fade
   * @returns why it cannot be done; null where it can
   */
  begin(
    input: SequencerInput,
    targets: readonly { channel: string; value: number }[],
    rampS: number,
    from: 'held' | 'applied' = 'held',
  ): string | null {
    this.legs = targets.map(({ channel, value }) => ({
      channel,
      from: this.startOf(channel, from === 'held' ? whereHeld(input, channel) : input.applied(channel)),
      to: value,
    }));
    this.rampedS = 0;
    this.durationS = rampS;
    for (const { channel, from, to } of this.legs) {
      const limit = this.services.limitOf(channel);
      if (!limit) return `"${channel}" has no limit in the envelope in force.`;
      if (!Number.isFinite(to)) return `The target of "${channel}" is no number.`;
      if (to < limit.min || to > limit.max) {
        return `The target ${to} of "${channel}" is outside its envelope of ${limit.min} to ${limit.max}.`;
      }
      if (!Number.isFinite(from)) return `It is not known where "${channel}" stands.`;
      this.durationS = Math.max(this.durationS, (Math.abs(to - from) / limit.slewPerS) * slewMargin);
    }
    return null;
  }

  /** Asks for the values of this scan, also to hold the targets. @returns true once all have arrived */
  step(input: SequencerInput): boolean {
    // After a gap the guard lets no lost time be made up; asking for it would only call it.
    this.rampedS += Math.min(input.dtS, slewPeriodsAtMost * this.services.periodS);
    const isComplete = this.rampedS >= this.durationS;
    let hasArrived = isComplete;
    for (const { channel, from, to } of this.legs) {
      const onLine = isComplete ? to : from + ((to - from) * this.rampedS) / this.durationS;
      this.services.request(channel, withinReach(this.services, input, channel, onLine), 0);
      const nearest =
        Math.abs(this.services.nearestTo(channel, to) - to) + this.services.toleranceOf(channel);
      // Written so that a value which is no number has not arrived.
      if (!(Math.abs(input.applied(channel) - to) <= nearest)) hasArrived = false;
    }
    return hasArrived;
  }

  /** @param waitedS time since the lines began, s */
  isOverdue(waitedS: number): boolean {
    return waitedS > durationTimesAtMost * this.durationS + arrivalGraceS;
  }

  /** An actuator found outside its envelope begins at the edge: nothing outside is asked for. */
  private startOf(channel: string, value: number): number {
    const limit = this.services.limitOf(channel);
    return limit ? Math.min(Math.max(value, limit.min), limit.max) : value;
  }
}

/** Where an actuator stands without dither, channel unit; NaN where that is not known. */
export function whereHeld(input: SequencerInput, channel: string): number {
  const held = input.held(channel);
  return Number.isFinite(held) ? held : input.applied(channel);
}
