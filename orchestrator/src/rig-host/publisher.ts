import type {
  FromHost,
  Readings,
  Rig,
  RigStatus,
  RunColumn,
  ScanInput,
  ScanOutput,
  Telemetry,
} from '@cresthold/shared';
import type { ScanSink } from './scan-loop.js';

/** Time between two batches, s: twenty a second. */
const batchEveryS = 0.05;
/** Rows that screens can use: closer ones are left out, s. */
const rowEveryS = 0.01;
const statusEveryS = 1;

export interface Link {
  /** @returns false where the message was dropped because the channel to the server is backed up */
  sendDroppable(message: FromHost): boolean;
}

/** Sends scans and status to screens: at most 20 batches a second, dropped rather than queued. */
export class Publisher implements ScanSink {
  private readonly rigColumns: string[];
  /** Channel indices of all but the traces, which are no numbers. */
  private readonly numbers: readonly number[];
  /** Channel indices of the actuators, in the order of the rig. */
  private readonly actuators: readonly number[];
  private columns: string[];
  private runId: string | null = null;
  private rows: Telemetry['rows'] = [];
  private sequence = 0;
  private lastRowS = -Infinity;
  private lastBatchS = -Infinity;
  private lastStatusS = -Infinity;
  private isStatusDue = true;

  constructor(
    private readonly rig: Rig,
    private readonly readings: Readings,
    private readonly link: Link,
    private readonly status: () => RigStatus,
  ) {
    this.actuators = rig.channels.flatMap(({ kind }, index) => (kind === 'actuator' ? [index] : []));
    this.numbers = rig.channels.flatMap(({ kind }, index) => (kind === 'trace' ? [] : [index]));
    const nameOf = (index: number) => readings.channelIds[index] ?? '';
    const applied = this.actuators.map((index) => `${nameOf(index)}.applied`);
    this.rigColumns = [...this.numbers.map(nameOf), ...applied];
    this.columns = this.rigColumns;
  }

  /** From now on rows hold the columns of a run, or of the rig alone. */
  useRun(run: { id: string; columns: readonly RunColumn[] } | null): void {
    this.sendBatch();
    this.runId = run?.id ?? null;
    this.columns = run?.columns.map((column) => column.name) ?? this.rigColumns;
  }

  requestStatus(): void {
    this.isStatusDue = true;
  }

  /** @realtime but for the batch that is sent */
  onScan(input: ScanInput, output: ScanOutput): void {
    if (input.tS - this.lastRowS >= rowEveryS) this.addRow(input, output);
    if (input.tS - this.lastBatchS >= batchEveryS) {
      this.lastBatchS = input.tS;
      this.sendBatch();
    }
    if (output.isStatusChanged) this.isStatusDue = true;
    if (this.isStatusDue || input.tS - this.lastStatusS >= statusEveryS) this.sendStatus(input.tS);
  }

  private addRow(input: ScanInput, output: ScanOutput): void {
    if ((output.row !== null) !== (this.runId !== null)) return;
    this.lastRowS = input.tS;
    const values = output.row === null ? this.rigValues(output) : rowValues(output.row);
    this.rows.push({ atMs: input.atMs, tS: output.runTS, values });
  }

  /** In the order of `rigColumns`. */
  private rigValues({ applied }: ScanOutput): (number | null)[] {
    const values: (number | null)[] = [];
    for (const index of this.numbers) values.push(numberOrNull(this.readings.goodValue(index)));
    for (const index of this.actuators) values.push(numberOrNull(applied[index] ?? NaN));
    return values;
  }

  private sendBatch(): void {
    if (this.rows.length === 0) return;
    const { columns, rows, runId } = this;
    this.sequence += 1;
    const telemetry = { rigId: this.rig.id, runId, sequence: this.sequence, columns, rows };
    this.rows = [];
    this.link.sendDroppable({ type: 'telemetry', telemetry });
  }

  private sendStatus(nowS: number): void {
    const isSent = this.link.sendDroppable({ type: 'status', status: this.status() });
    if (!isSent) return;
    this.isStatusDue = false;
    this.lastStatusS = nowS;
  }
}

function numberOrNull(value: number): number | null {
  return Number.isFinite(value) ? value : null;
}

function rowValues(row: Float64Array): (number | null)[] {
  const values: (number | null)[] = [];
  for (let i = 0; i < row.length; i += 1) values.push(numberOrNull(row[i] ?? NaN));
  return values;
}
