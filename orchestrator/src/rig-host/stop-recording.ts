import {
  trajectoryRowsMax,
  type EnvelopeInForce,
  type FromHost,
  type Readings,
  type Rig,
  type ScanInput,
  type ScanOutput,
  type StopTrajectory,
  type Trip,
} from '@cresthold/shared';
import type { ScanSink } from './scan-loop.js';
import { ThinnedRows } from './thinned-rows.js';
import { RestTimes } from './rest-times.js';

/** Longest record of a stop, s. */
export const recordedForS = 60;
/** How long the record goes on at rest, s. */
const atRestForS = 1;
/** Rows before the trip: enough for about a second at up to fifty a second. */
const rowsBefore = 50;
const rowBeforeEveryS = 0.02;

export interface StopRecordingOwner {
  trip(): Trip | null;
  isAtRest(): boolean;
  envelope(): EnvelopeInForce | null;
  send(message: FromHost): void;
}

type Row = StopTrajectory['rows'][number];

interface OpenRecord {
  trip: Trip;
  beganS: number;
  rows: ThinnedRows<Row>;
  restTimes: RestTimes;
  restSinceS: number | null;
}

/** Keeps the scans of every stop after a trip until the rig is at rest, whether a run was going on or not. */
export class StopRecording implements ScanSink {
  private readonly columns: string[];
  private readonly numbers: readonly number[];
  private readonly actuators: readonly number[];
  private before: Row[] = [];
  private record: OpenRecord | null = null;
  private knownTrip: string | null;

  /** @param trip one that was latched before: how its rig came to rest was seen by another host, or by none */
  constructor(
    rig: Rig,
    private readonly readings: Readings,
    trip: Trip | null,
    private readonly owner: StopRecordingOwner,
  ) {
    this.actuators = rig.channels.flatMap(({ kind }, index) => (kind === 'actuator' ? [index] : []));
    this.numbers = rig.channels.flatMap(({ kind }, index) => (kind === 'trace' ? [] : [index]));
    const nameOf = (index: number) => readings.channelIds[index] ?? '';
    this.columns = [
      ...this.numbers.map(nameOf),
      ...this.actuators.map((index) => `${nameOf(index)}.applied`),
    ];
    this.knownTrip = keyOf(trip);
  }

  onScan(input: ScanInput, output: ScanOutput): void {
    if (output.isStatusChanged) this.lookAtTrip(input.tS);
    if (this.record) this.extend(this.record, input.tS, output);
    else this.rememberBefore(input.tS, output);
  }

  /** Sends what there is of an open record: the host ends. */
  finish(): void {
    const { record } = this;
    if (record === null) return;
    this.record = null;
    this.before = [];
    this.owner.send({
      type: 'stop-trajectory',
      trip: { cause: record.trip.cause, at: record.trip.at },
      trajectory: {
        columns: this.columns,
        rows: record.rows.all(),
        timesToRest: record.restTimes.times(),
        isAtRest: record.restSinceS !== null,
      },
    });
  }

  private lookAtTrip(tS: number): void {
    const trip = this.owner.trip();
    const key = keyOf(trip);
    if (key === this.knownTrip) return;
    this.finish();
    this.knownTrip = key;
    if (trip === null) return;
    const rows = new ThinnedRows<Row>(trajectoryRowsMax);
    for (const row of this.before) rows.add({ ...row, tS: row.tS - tS });
    const limits = this.owner.envelope()?.content.limits ?? [];
    const restTimes = new RestTimes(limits, this.readings);
    this.record = { trip, beganS: tS, rows, restTimes, restSinceS: null };
  }

  private extend(record: OpenRecord, nowS: number, output: ScanOutput): void {
    const tS = nowS - record.beganS;
    record.rows.add({ tS, values: this.values(output) });
    record.restTimes.look(tS);
    if (!this.owner.isAtRest()) record.restSinceS = null;
    else record.restSinceS ??= tS;
    const isRestSeen = record.restSinceS !== null && tS - record.restSinceS >= atRestForS;
    if (isRestSeen || tS >= recordedForS) this.finish();
  }

  private rememberBefore(tS: number, output: ScanOutput): void {
    const last = this.before.at(-1);
    if (last !== undefined && tS - last.tS < rowBeforeEveryS) return;
    this.before.push({ tS, values: this.values(output) });
    if (this.before.length > rowsBefore) this.before.shift();
  }

  private values({ applied }: ScanOutput): (number | null)[] {
    const values: (number | null)[] = [];
    for (const index of this.numbers) values.push(numberOrNull(this.readings.goodValue(index)));
    for (const index of this.actuators) values.push(numberOrNull(applied[index] ?? NaN));
    return values;
  }
}

function keyOf(trip: Trip | null): string | null {
  return trip === null ? null : `${trip.at} ${trip.cause}`;
}

function numberOrNull(value: number): number | null {
  return Number.isFinite(value) ? value : null;
}
