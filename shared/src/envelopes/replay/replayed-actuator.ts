import type { Readings } from '../../scan/readings.js';
import type { ActuatorLimit } from '../envelope.schema.js';
import { createGuardedActuator, guardRequest, guardRules, takeOver, type GuardedActuator } from '../guard.js';
import { Least } from './extreme.js';
import type { ReplayedActuator } from './replay-report.schema.js';

/** Two times closer than this are the same, s: sums of periods are not exact. */
const sameTimeS = 1e-9;
/** Share of a limit by which it is passed where it only looks so: what was asked for rests on sums. */
const rounding = 1e-9;
const rangeRule = guardRules.indexOf('range');
const slewRule = guardRules.indexOf('slew');

/** Where the record has what belongs to an actuator: indexes of columns, −1 where it has none. */
export interface ActuatorColumns {
  requested: number;
  applied: number;
  /** Estimates of every Seek that drove it. */
  estimates: readonly number[];
}

/**
 * One actuator on its way through a record, behind the guard of the draft. Each scan starts from what was applied
 * in the scan before, so that one clip does not make others.
 */
export class ReplayedActuatorGuard {
  private readonly guarded: GuardedActuator | null;
  private readonly readingIndex: number;
  private readonly range = { clips: 0, margin: new Least() };
  private readonly slew = { clips: 0, margin: new Least() };
  private readonly dither = { clips: 0, margin: new Least() };
  private readonly readBack = new Least();
  private requests = 0;
  private appliedOutside = 0;
  private readBackTrips = 0;
  private mismatchSinceS = NaN;
  private hasTripped = false;
  private lastApplied = NaN;

  constructor(
    private readonly channel: string,
    private readonly limit: ActuatorLimit | null,
    private readonly columns: ActuatorColumns,
    private readonly readings: Readings,
    periodS: number,
  ) {
    this.guarded = limit ? createGuardedActuator(limit, undefined, periodS) : null;
    this.readingIndex = readings.indexOf(channel);
  }

  /** @returns whether its read-back would have tripped in this scan */
  scan(row: ArrayLike<number>, tS: number, dtS: number): boolean {
    const { guarded, limit, columns } = this;
    const requested = row[columns.requested] ?? NaN;
    const applied = row[columns.applied] ?? NaN;
    if (Number.isFinite(requested)) this.requests += 1;
    let isTrip = false;
    if (guarded && limit) {
      isTrip = this.watchReadBack(limit, tS);
      if (Number.isFinite(requested)) this.guardRequested(guarded, requested, tS, dtS);
      this.watchDither(limit, requested, row, tS);
      this.watchApplied(limit, applied, tS, dtS);
    }
    this.lastApplied = applied;
    return isTrip;
  }

  report(): ReplayedActuator {
    const { channel, guarded, requests, appliedOutside, readBackTrips } = this;
    const clipsOf = ({ clips, margin }: typeof this.range) => ({ clips, leastMargin: margin.found });
    return {
      channel,
      isLimited: guarded !== null,
      requests,
      range: clipsOf(this.range),
      slew: clipsOf(this.slew),
      dither: clipsOf(this.dither),
      appliedOutside,
      readBackTrips,
      readBackLeastMargin: this.readBack.found,
    };
  }

  private guardRequested(guarded: GuardedActuator, requested: number, tS: number, dtS: number): void {
    const { min, max } = guarded.limit;
    this.range.margin.take(Math.min(requested - min, max - requested), tS);
    const from = Number.isFinite(this.lastApplied)
      ? this.lastApplied
      : this.readings.goodValue(this.readingIndex);
    if (!takeOver(guarded, from)) return;
    const before = [guarded.counts[rangeRule] ?? 0, guarded.counts[slewRule] ?? 0];
    guardRequest(guarded, requested, 0, dtS);
    this.range.clips += (guarded.counts[rangeRule] ?? 0) - (before[0] ?? 0);
    const isPast = Math.abs(requested - guarded.applied) > rounding * Math.max(1, Math.abs(requested));
    if (isPast) this.slew.clips += (guarded.counts[slewRule] ?? 0) - (before[1] ?? 0);
  }

  private watchDither(limit: ActuatorLimit, requested: number, row: ArrayLike<number>, tS: number): void {
    for (const column of this.columns.estimates) {
      const amplitude = Math.abs(requested - (row[column] ?? NaN));
      if (!Number.isFinite(amplitude)) continue;
      this.dither.margin.take(limit.ditherAmplitudeMax - amplitude, tS);
      if (amplitude > limit.ditherAmplitudeMax * (1 + rounding) + rounding) this.dither.clips += 1;
    }
  }

  private watchApplied(limit: ActuatorLimit, applied: number, tS: number, dtS: number): void {
    if (applied < limit.min || applied > limit.max) this.appliedOutside += 1;
    this.slew.margin.take(limit.slewPerS - Math.abs(applied - this.lastApplied) / dtS, tS);
  }

  /** Compares as the scan does: what is read now with what was written in the scan before. */
  private watchReadBack(limit: ActuatorLimit, tS: number): boolean {
    if (Number.isNaN(this.lastApplied)) {
      this.mismatchSinceS = NaN;
      return false;
    }
    const error = Math.abs(this.readings.goodValue(this.readingIndex) - this.lastApplied);
    this.readBack.take(limit.readBackTolerance - error, tS);
    if (error <= limit.readBackTolerance) {
      this.mismatchSinceS = NaN;
      this.hasTripped = false;
      return false;
    }
    if (Number.isNaN(this.mismatchSinceS)) this.mismatchSinceS = tS;
    if (this.hasTripped || tS - this.mismatchSinceS <= limit.readBackWithinS + sameTimeS) return false;
    this.hasTripped = true;
    this.readBackTrips += 1;
    return true;
  }
}
