import { channelSymbols } from '../../expressions/channel-symbols.js';
import { Quality } from '../../rigs/quality.js';
import type { Rig } from '../../rigs/rig.schema.js';
import type { RunColumn } from '../../runs/run-columns.js';
import type { RunEventBody } from '../../runs/run-event.schema.js';
import { Readings } from '../../scan/readings.js';
import type { EnvelopeContent } from '../envelope.schema.js';
import { type RecordedEnd, replayHints } from './replay-hints.js';
import type { Halt, ReplayReport } from './replay-report.schema.js';
import { ReplayedActuatorGuard } from './replayed-actuator.js';
import { ReplayedInterlockJudge } from './replayed-interlock.js';
import { ReplayedEmergencyStop, ReplayedFreshness } from './replayed-watches.js';

/** The record that an envelope is replayed on. */
export interface ReplayedRecord {
  /** The rig as it was wired in that run. */
  rig: Rig;
  /** What stands in each place of a row. */
  columns: readonly RunColumn[];
}

interface ReadingColumn {
  column: number;
  reading: number;
}

/**
 * Replays an envelope on the record of a run, scan by scan, and keeps what it would have done. It holds no samples:
 * its size does not grow with the run.
 *
 * Bypasses and acknowledgements of the record count here as well, where the draft allows them. What happened after
 * the first halt would not have come to pass under this envelope; it is listed all the same, so that one nuisance
 * trip does not hide another. Silence of the server is in no record and is not judged.
 */
export class EnvelopeReplay {
  private readonly readings: Readings;
  private readonly readingColumns: readonly ReadingColumn[];
  private readonly interlocks: readonly ReplayedInterlockJudge[];
  private readonly freshness: readonly ReplayedFreshness[];
  private readonly emergencyStops: readonly ReplayedEmergencyStop[];
  private readonly actuators: readonly { channel: string; guard: ReplayedActuatorGuard }[];
  private readonly periodS: number;
  private firstHalt: Halt | null = null;
  private mostOverruns = 0;
  private scans = 0;
  private lastTS: number;

  constructor(
    private readonly content: EnvelopeContent,
    record: ReplayedRecord,
  ) {
    const { rig, columns } = record;
    const readings = Readings.of(rig);
    this.readings = readings;
    this.periodS = rig.periodMs / 1000;
    this.lastTS = -this.periodS;
    this.readingColumns = columns.flatMap(({ name, kind }, column) =>
      kind === 'reading' ? [{ column, reading: readings.indexOf(name) }] : [],
    );
    const symbols = channelSymbols(rig);
    this.interlocks = content.interlocks.map((lock) => new ReplayedInterlockJudge(lock, symbols, readings));
    const isThere = ({ channel }: { channel: string }) => readings.indexOf(channel) >= 0;
    this.freshness = content.staleness.filter(isThere).map((limit) => new ReplayedFreshness(limit, readings));
    const inputs = content.emergencyStopInputs.filter(isThere);
    this.emergencyStops = inputs.map((input) => new ReplayedEmergencyStop(input, readings));
    this.actuators = actuatorsIn(record, content, readings);
  }

  /**
   * Takes an event of the record. Give those up to a scan before that scan, in their order.
   *
   * @param runTS time of the event, s since the run began
   */
  event(body: RunEventBody, runTS: number): void {
    if (body.type === 'scan.overran') {
      this.mostOverruns = Math.max(this.mostOverruns, body.consecutive);
      if (body.consecutive >= this.content.overrunLimit) this.halt('overrun', 'trip', runTS);
      return;
    }
    if (!('interlock' in body)) return;
    const judge = this.interlocks.find(({ interlock }) => interlock.id === body.interlock);
    if (!judge?.judged) return;
    const { lastTS } = this;
    if (body.type === 'interlock.acknowledged') judge.judged.acknowledge();
    if (body.type === 'interlock.bypass-ended' && body.by !== null) judge.judged.endBypass();
    const { bypassAtMostS } = judge.interlock;
    if (body.type === 'interlock.bypassed' && bypassAtMostS !== null) {
      judge.bypassUntil(lastTS + Math.min(body.forS, bypassAtMostS), lastTS);
    }
  }

  /**
   * @param tS time since the run began, s; never less than in the scan before
   * @param row values in the order of the columns; NaN where the record has none
   */
  scan(tS: number, row: ArrayLike<number>): void {
    const dtS = this.scans === 0 ? this.periodS : Math.max(tS - this.lastTS, 1e-6);
    for (const { column, reading } of this.readingColumns) {
      this.readings.set(reading, row[column] ?? NaN, Quality.good);
    }
    for (const stop of this.emergencyStops) {
      if (stop.scan(tS)) this.halt(`emergency-stop-input:${stop.input.channel}`, 'trip', tS);
    }
    this.judgeInterlocks(tS);
    for (const watch of this.freshness) {
      if (watch.scan(tS)) this.halt(`stale:${watch.limit.channel}`, 'trip', tS);
    }
    for (const { channel, guard } of this.actuators) {
      if (guard.scan(row, tS, dtS)) this.halt(`read-back:${channel}`, 'trip', tS);
    }
    this.scans += 1;
    this.lastTS = tS;
  }

  /** @param end how the run really ended, for the hints */
  report(end: RecordedEnd): ReplayReport {
    const { overrunLimit } = this.content;
    return {
      scans: this.scans,
      untilTS: Math.max(this.lastTS, 0),
      firstHalt: this.firstHalt,
      interlocks: this.interlocks.map((judge) => judge.report(this.lastTS)),
      actuators: this.actuators.map(({ guard }) => guard.report()),
      staleness: this.freshness.map((watch) => watch.report()),
      emergencyStops: this.emergencyStops.map((stop) => stop.report()),
      overruns: {
        mostInARow: this.mostOverruns,
        limit: overrunLimit,
        isTrip: this.mostOverruns >= overrunLimit,
      },
      hints: replayHints(end, this.firstHalt),
    };
  }

  /** In one scan the one that came due first is first out, as in the scan itself. */
  private judgeInterlocks(tS: number): void {
    let first: ReplayedInterlockJudge | null = null;
    for (const judge of this.interlocks) {
      const { action } = judge.interlock;
      const isHalting = judge.scan(tS) === 'acted' && (action === 'stop' || action === 'trip');
      if (isHalting && !(dueS(first) <= dueS(judge))) first = judge;
    }
    if (!first) return;
    const { id, action } = first.interlock;
    this.halt(`interlock:${id}`, action === 'trip' ? 'trip' : 'stop', tS);
  }

  private halt(cause: string, action: Halt['action'], tS: number): void {
    this.firstHalt ??= { cause, action, tS };
  }
}

const dueS = (judge: ReplayedInterlockJudge | null): number => judge?.judged?.dueS ?? NaN;

/** Every actuator that has a limit in the draft or was asked for in the record. */
function actuatorsIn({ rig, columns }: ReplayedRecord, content: EnvelopeContent, readings: Readings) {
  const indexOf = (name: string) => columns.findIndex((column) => column.name === name);
  const found = rig.channels.filter(
    ({ id, kind }) => kind === 'actuator' && id !== content.heartbeat?.channel,
  );
  return found.map(({ id }) => {
    const places = {
      requested: indexOf(`${id}.requested`),
      applied: indexOf(`${id}.applied`),
      estimates: columns.flatMap(({ name }, at) => (name.endsWith(`.estimate.${id}`) ? [at] : [])),
    };
    const limit = content.limits.find(({ channel }) => channel === id) ?? null;
    const guard = new ReplayedActuatorGuard(id, limit, places, readings, rig.periodMs / 1000);
    return { channel: id, guard };
  });
}
