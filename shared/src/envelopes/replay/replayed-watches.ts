import type { Readings } from '../../scan/readings.js';
import type { EmergencyStopInput } from '../envelope.schema.js';
import type { StalenessLimit } from '../staleness-judge.js';
import type { ReplayedStaleness } from './replay-report.schema.js';

/** Two times closer than this are the same, s: sums of periods are not exact. */
const sameTimeS = 1e-9;

/** The age of one sensor through a record. What it was before the record began is taken as fresh. */
export class ReplayedFreshness {
  private readonly index: number;
  private lastGoodS = NaN;
  private isStale = false;
  private trips = 0;
  private firstTS: number | null = null;
  private oldestS = 0;
  private oldestAtTS = 0;

  constructor(
    readonly limit: StalenessLimit,
    private readonly readings: Readings,
  ) {
    this.index = readings.indexOf(limit.channel);
  }

  /** @returns whether it became stale in this scan */
  scan(tS: number): boolean {
    if (Number.isNaN(this.lastGoodS) || this.readings.isGood(this.index)) this.lastGoodS = tS;
    const ageS = tS - this.lastGoodS;
    if (ageS > this.oldestS) {
      this.oldestS = ageS;
      this.oldestAtTS = tS;
    }
    const wasStale = this.isStale;
    this.isStale = ageS > this.limit.afterS + sameTimeS;
    if (!this.isStale || wasStale) return false;
    this.trips += 1;
    this.firstTS ??= tS;
    return true;
  }

  report(): ReplayedStaleness {
    const { trips, firstTS, oldestS, oldestAtTS } = this;
    return { channel: this.limit.channel, trips, firstTS, oldestS, oldestAtTS };
  }
}

/** One input from a hard-wired emergency stop through a record; not known counts as pressed, as in the scan. */
export class ReplayedEmergencyStop {
  private readonly index: number;
  private wasPressed = false;
  private presses = 0;
  private firstTS: number | null = null;

  constructor(
    readonly input: EmergencyStopInput,
    private readonly readings: Readings,
  ) {
    this.index = readings.indexOf(input.channel);
  }

  /** @returns whether it came to be pressed in this scan */
  scan(tS: number): boolean {
    const value = this.readings.goodValue(this.index);
    const isPressed = Number.isNaN(value) || (value === 0) === (this.input.pressedWhen === 'zero');
    const isNew = isPressed && !this.wasPressed;
    this.wasPressed = isPressed;
    if (!isNew) return false;
    this.presses += 1;
    this.firstTS ??= tS;
    return true;
  }

  report() {
    const { channel, title } = this.input;
    return { channel, title, presses: this.presses, firstTS: this.firstTS };
  }
}
