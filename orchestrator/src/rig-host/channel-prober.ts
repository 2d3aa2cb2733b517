import type { ProbeOutcome } from '@cresthold/adapters';
import {
  compileConversion,
  DomainError,
  probedPointsMax,
  Quality,
  type CalibrationInForce,
  type ChannelProbe,
  type Channel,
  type Readings,
  type Rig,
} from '@cresthold/shared';
import type { Line } from './line.js';
import type { Wire } from './wire.js';
import { within } from './within.js';

/** Longest time for one test, ms; below the bound within which the server wants its reply. */
const probeBoundMs = 4_000;

const qualityNames = ['good', 'stale', 'bad', 'missing'] as const satisfies readonly (keyof typeof Quality)[];

export interface ProberParts {
  rig: Rig;
  readings: Readings;
  wire: Pick<Wire, 'lineOf'>;
  calibrations: readonly CalibrationInForce[];
  /** Whether nothing moves and no run is open. */
  isAtRest: () => boolean;
}

type Found = Omit<ChannelProbe, 'channel' | 'at' | 'calibration' | 'calibrated'>;

/**
 * Live test of single channels. The device is asked only while the rig is at rest, and for one channel at a time, so
 * that a scan waits for one request at most; else what the scan read last is told.
 */
export class ChannelProber {
  private tail: Promise<unknown> = Promise.resolve();

  constructor(private readonly parts: ProberParts) {}

  /** @throws channel.not-found */
  async probe(channelId: string): Promise<ChannelProbe> {
    const { rig, readings } = this.parts;
    const channel = rig.channels.find(({ id }) => id === channelId);
    if (channel === undefined) {
      throw new DomainError('channel.not-found', `The rig has no channel "${channelId}" as it runs now.`);
    }
    const found = await this.find(channel, readings.indexOf(channelId));
    const calibration = this.parts.calibrations.find((one) => one.channel === channelId);
    return {
      channel: channelId,
      at: new Date().toISOString(),
      ...found,
      calibrated: numberOrNull(this.calibrated(channelId, found.value)),
      calibration: calibration ? { id: calibration.id, version: calibration.version } : null,
    };
  }

  private async find(channel: Channel, index: number): Promise<Found> {
    const line = this.parts.wire.lineOf(index);
    if (line === undefined) return this.derived(index);
    const note = this.obstacle(line);
    if (note !== null) return this.lastRead(line, index, note);
    const outcome = await within(this.inTurn(line, index), probeBoundMs, 'late' as const);
    if (outcome === 'late') return failed(tooLate());
    return outcome === null ? this.lastRead(line, index, 'The connection is down.') : tried(outcome);
  }

  /** Why the device is not asked now; null where it is. */
  private obstacle(line: Line): string | null {
    if (!this.parts.isAtRest()) return 'The rig is not at rest: this is what its scan read last.';
    if (!line.isConnected) return 'The connection is down.';
    if (!line.canProbe) return 'The adapter cannot try one address: this is what the scan read last.';
    return null;
  }

  private async inTurn(line: Line, index: number): Promise<ProbeOutcome | null> {
    const turn = this.tail.then(() => line.probe(index));
    this.tail = turn.catch(() => undefined);
    try {
      return await turn;
    } catch (error) {
      if (!(error instanceof DomainError)) throw error;
      return { raw: '', value: NaN, trace: null, fault: error };
    }
  }

  /** @returns NaN where the channel is not calibrated, or its value is not covered */
  private calibrated(channelId: string, value: number | null): number {
    const conversion = this.parts.calibrations.find((one) => one.channel === channelId)?.conversion;
    if (conversion === undefined || value === null) return NaN;
    const junction = conversion.kind === 'thermocouple' ? conversion.coldJunction : null;
    const coldC =
      junction === null || 'celsius' in junction ? junction?.celsius : this.valueOf(junction.channel);
    return compileConversion(conversion)(value, coldC ?? NaN);
  }

  /** What a sensor reads by the last scan, by its calibration where it has one. */
  private valueOf(channelId: string): number {
    const index = this.parts.readings.indexOf(channelId);
    const given = this.parts.wire.lineOf(index)?.lastReading(index).value ?? NaN;
    const isCalibrated = this.parts.calibrations.some(({ channel }) => channel === channelId);
    return isCalibrated ? this.calibrated(channelId, given) : given;
  }

  private derived(index: number): Found {
    const value = numberOrNull(this.parts.readings.goodValue(index));
    const note = 'A derived channel: its value of the last scan.';
    const ageS = value === null ? null : 0;
    return { ...nothing, note, value, ageS, quality: this.quality(index) };
  }

  private lastRead(line: Line, index: number, note: string): Found {
    const { value, ageS, fault } = line.lastReading(index);
    const trace = this.parts.readings.goodTrace(index);
    return {
      ...nothing,
      note,
      value: numberOrNull(value),
      trace: trace && firstPoints(trace.points),
      ageS: numberOrNull(ageS),
      quality: this.quality(index),
      fault: fault && { code: fault.code, message: fault.message },
    };
  }

  private quality(index: number): ChannelProbe['quality'] {
    return qualityNames[this.parts.readings.qualities[index] ?? Quality.missing] ?? 'missing';
  }
}

const nothing: Found = {
  source: 'scan',
  note: null,
  raw: null,
  value: null,
  trace: null,
  ageS: null,
  quality: 'missing',
  fault: null,
};

function tried({ raw, value, trace, fault }: ProbeOutcome): Found {
  if (fault !== null) return { ...failed(fault), raw: raw === '' ? null : raw };
  const isTrace = trace !== null;
  const isNumber = isTrace ? trace.length > 0 && trace.every(Number.isFinite) : Number.isFinite(value);
  return {
    source: 'wire',
    note: null,
    raw: raw === '' ? null : raw,
    value: numberOrNull(value),
    trace: isTrace ? firstPoints(trace) : null,
    ageS: 0,
    quality: isNumber ? 'good' : 'bad',
    fault: null,
  };
}

function failed({ code, message }: DomainError): Found {
  const quality = code === 'adapter.refused' || code === 'adapter.corrupt' ? 'bad' : 'missing';
  return { ...nothing, source: 'wire', quality, fault: { code, message } };
}

function tooLate(): DomainError {
  const message = `The device, or the tests before this one, took longer than ${probeBoundMs / 1000} s.`;
  return new DomainError('adapter.timeout', message);
}

function firstPoints(points: ArrayLike<number>): ChannelProbe['trace'] {
  const first = Array.from(points).slice(0, probedPointsMax).filter(Number.isFinite);
  return { count: points.length, points: first };
}

function numberOrNull(value: number): number | null {
  return Number.isFinite(value) ? value : null;
}
