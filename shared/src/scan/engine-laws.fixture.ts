import { plantEnvelope, plantRig } from './fake-plant.fixture.js';
import type { FuzzCase, FuzzScan } from './engine-fuzz.fixture.js';

const period2S = (2 * plantRig.periodMs) / 1000;
const limits = plantEnvelope().content.limits;
const motion = ['armed', 'running', 'stopping', 'tripped'];
const rounding = 1e-9;

/** A plain throw: a million calls of an assertion library would take the time of the test. */
function hold(isHeld: boolean, law: string, value?: number): void {
  if (!isHeld) throw new Error(`Broken: ${law}${value === undefined ? '' : ` (${value})`}.`);
}

/** How often the laws were put to the test: a law that is never tried proves nothing. */
export interface LawCounts {
  scans: number;
  writes: number;
  trips: number;
  jumps: number;
}

/** Holds the writes of one rig's life against the envelope, as a log of the wire would be. */
export class WriteLaws {
  private readonly last = new Map<string, number>();
  /** Last good read-back: what arming or the return of a wire may go on from. */
  private readonly read = new Map<string, number>();
  private readonly wasWritten = new Set<string>();
  /** How far each actuator was from rest with its last write of this trip. */
  private readonly onItsWay = new Map<string, { rest: number; distance: number }>();

  constructor(
    private readonly fuzzCase: FuzzCase,
    private readonly counts: LawCounts,
  ) {}

  check(scan: FuzzScan): void {
    this.counts.scans++;
    if (scan.phaseBefore !== 'tripped' && scan.phaseAfter === 'tripped') this.counts.trips++;
    if (scan.phaseAfter !== 'tripped') this.onItsWay.clear();
    const channels = scan.output.writes.map(({ channel }) => channel);
    hold(!channels.includes('free'), 'an actuator without a limit is never written');
    hold(new Set(channels).size === channels.length, 'each actuator is written once a scan');
    const beat = channels.indexOf('beat');
    hold(beat < 0 || beat === channels.length - 1, 'the heartbeat comes last');
    for (const [channel, value] of Object.entries(scan.readBack)) {
      if (!Number.isNaN(value)) this.read.set(channel, value);
    }
    limits.forEach((limit, index) => {
      const write = scan.output.writes.find(({ channel }) => channel === limit.channel);
      if (write) this.checkWrite(scan, index, write.value);
      else this.forget(limit.channel);
    });
  }

  private forget(channel: string): void {
    this.wasWritten.delete(channel);
    this.onItsWay.delete(channel);
  }

  private checkWrite(scan: FuzzScan, index: number, value: number): void {
    const limit = limits[index];
    if (!limit) throw new Error('No limit.');
    const { channel } = limit;
    this.counts.writes++;
    hold(motion.includes(scan.phaseAfter), 'nothing is written while idle or offline');
    hold(Number.isFinite(value), 'only numbers are written', value);
    const isInside = value >= limit.min && value <= limit.max;
    hold(isInside || this.isComingIn(channel, value), 'inside the range, or on the way in', value);
    this.checkSlew(scan, index, value);
    this.checkWayToRest(scan, channel, value);
    this.last.set(channel, value);
    this.wasWritten.add(channel);
  }

  /** After a break the engine may go on from the read-back, else only from its own last write. */
  private movedBy(channel: string, value: number): number {
    const fromLast = Math.abs(value - (this.last.get(channel) ?? NaN));
    const fromReadBack = Math.abs(value - (this.read.get(channel) ?? NaN));
    if (this.wasWritten.has(channel) || Number.isNaN(fromReadBack)) return fromLast;
    return Number.isNaN(fromLast) ? fromReadBack : Math.min(fromLast, fromReadBack);
  }

  private isComingIn(channel: string, value: number): boolean {
    const from = [this.last.get(channel), this.read.get(channel)];
    return from.some((before) => before !== undefined && Math.abs(value - 50) <= Math.abs(before - 50));
  }

  private checkSlew(scan: FuzzScan, index: number, value: number): void {
    const { channel, slewPerS } = limits[index] ?? { channel: '', slewPerS: NaN };
    const isStop = scan.phaseAfter === 'stopping' || scan.phaseAfter === 'tripped';
    const isJump = isStop && this.fuzzCase.categories[index] === 0;
    const step = channel === 'valve' ? this.fuzzCase.gridStep : 0;
    const allowed = Math.max(slewPerS * Math.min(scan.dtS, period2S), step) + rounding;
    if (this.movedBy(channel, value) <= allowed) return;
    this.counts.jumps++;
    hold(isJump, 'only a stop of category 0 is faster than the slew limit', value);
    const rest = scan.rest[channel] ?? NaN;
    /** Near the end of the range the nearest grid point may lie beyond it. */
    hold(Math.abs(value - rest) <= step + rounding, 'it jumps to rest and nowhere else', value);
  }

  private checkWayToRest(scan: FuzzScan, channel: string, value: number): void {
    if (scan.phaseBefore !== 'tripped' || scan.phaseAfter !== 'tripped') {
      // Reset, armed and tripped anew between two scans: another way begins.
      this.onItsWay.delete(channel);
      return;
    }
    const rest = scan.rest[channel] ?? NaN;
    const distance = Math.abs(value - rest);
    const known = this.onItsWay.get(channel);
    const before = known?.rest === rest ? known.distance : Infinity;
    const step = channel === 'valve' ? this.fuzzCase.gridStep : 0;
    /** The rest value itself may lie beside the grid. */
    hold(distance <= Math.max(before, step) + rounding, 'after a trip every write leads to rest', value);
    this.onItsWay.set(channel, { rest, distance });
  }
}
