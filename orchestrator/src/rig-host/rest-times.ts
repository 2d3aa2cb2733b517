import type { ActuatorLimit, Readings, TimeToRest } from '@cresthold/shared';

interface Watched {
  channel: string;
  index: number;
  rest: number;
  tolerance: number;
  sinceS: number | null;
}

/** Since when the read-back of each actuator has been at rest, within its tolerance, without leaving it again. */
export class RestTimes {
  private readonly watched: Watched[];

  constructor(
    limits: readonly ActuatorLimit[],
    private readonly readings: Readings,
  ) {
    this.watched = limits.map(({ channel, rest, readBackTolerance }) => ({
      channel,
      index: readings.indexOf(channel),
      rest,
      tolerance: readBackTolerance,
      sinceS: null,
    }));
  }

  /** @param tS time since the trip, s */
  look(tS: number): void {
    for (const one of this.watched) {
      const isAtRest = Math.abs(this.readings.goodValue(one.index) - one.rest) <= one.tolerance;
      if (!isAtRest) one.sinceS = null;
      else one.sinceS ??= tS;
    }
  }

  times(): TimeToRest[] {
    return this.watched.map(({ channel, sinceS }) => ({ channel, timeS: sinceS }));
  }
}
