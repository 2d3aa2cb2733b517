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
    this.columns = [...readings.channelIds];
  }

  /** From now on rows hold the columns of a run, or of the rig alone. */
  useRun(run: { id: string; columns: readonly RunColumn[] } | null): void {
    this.sendBatch();
    this.runId = run?.id ?? null;
    this.columns = run?.columns.map((column) => column.name) ?? [...this.readings.channelIds];
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
    const values: (number | null)[] = [];
    const source = output.row;
    for (let i = 0; i < this.columns.length; i += 1) {
      const value = source === null ? this.readings.goodValue(i) : (source[i] ?? NaN);
      values.push(Number.isFinite(value) ? value : null);
    }
    this.rows.push({ atMs: input.atMs, tS: output.runTS, values });
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
