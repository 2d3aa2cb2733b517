import { Worker } from 'node:worker_threads';
import { DomainError, type RunEvent } from '@cresthold/shared';
import { rowLead, type RunEnd, type RunManifest } from '../recordings/run-file/index.js';
import { Bell } from './bell.js';
import { monotonicS } from './monotonic-clock.js';
import type { FromRecorder, ToRecorder } from './recorder-messages.js';
import { buffersOf, TraceBuffer } from './trace-buffer.js';
import { within } from './within.js';

/** Rows wait at most this long before they go to the recorder thread, ms. */
const flushAfterMs = 40;
/** The recorder counts as failed when it has not written a batch for this long, s. */
const behindMaxS = 5;
/** Longest wait for a new file, ms. */
const prepareBoundMs = 4000;
/** Rows of one buffer; a faster loop fills it before the time is up. */
const rowsPerBatch = 256;

/**
 * The loop's side of the recorder. `append` and `appendEvent` never wait: rows are copied into a buffer
 * that is handed to the recorder thread every 40 ms at the latest. Rows are never dropped; where the
 * disk cannot follow, `onFailure` is told and the rows wait in memory.
 */
export class Recorder {
  /** Resolves when the thread has loaded what it needs; rejects where it ended before. */
  readonly ready: Promise<void>;
  private readonly worker: Worker;
  private readonly free: Float64Array<ArrayBuffer>[] = [];
  private readonly prepared = new Bell<FromRecorder & { type: 'prepared' }>();
  private readonly ended = new Bell<FromRecorder & { type: 'ended' }>();
  private readonly labelIndex = new Map<string, number>();
  private readonly postedAtS: number[] = [];
  private newLabels: string[] = [];
  private events: RunEvent[] = [];
  private traces = new TraceBuffer();
  private width = 0;
  private capacity = 0;
  private data: Float64Array<ArrayBuffer> = new Float64Array(0);
  private rows = 0;
  private flushTimer: NodeJS.Timeout | null = null;
  private isClosed = false;
  private hasFailed = false;
  /** Why the thread is gone; null while it lives. */
  private threadEnd: string | null = null;

  /**
   * @param onFailure told once per run, in words, when samples cannot be written
   * @param workerFile the built program of the thread
   */
  constructor(
    private readonly onFailure: (message: string) => void,
    workerFile: URL = new URL('./recorder-worker.js', import.meta.url),
  ) {
    this.worker = new Worker(workerFile);
    this.ready = new Promise((resolve, reject) => {
      this.worker.once('message', resolve);
      this.worker.once('error', reject);
    });
    this.ready.catch(() => undefined);
    this.worker.on('message', (message: FromRecorder) => this.take(message));
    this.worker.on('error', (error) => this.onThreadEnd(error.message));
    this.worker.on('exit', () => this.isClosed || this.onThreadEnd('it exited'));
  }

  /**
   * Creates the run file, before anything moves.
   *
   * @throws recorder.failed where it cannot be created
   */
  async prepare(file: string): Promise<void> {
    if (this.threadEnd !== null) throw new DomainError('recorder.failed', this.threadEnd);
    this.post({ type: 'prepare', file });
    const late = { error: `nothing was heard of it for ${prepareBoundMs} ms` };
    const { error } = await within(this.prepared.next(), prepareBoundMs, late);
    if (error !== null) {
      throw new DomainError('recorder.failed', `The run file cannot be created: ${error}`);
    }
  }

  /** Removes a prepared file whose run never began. */
  abandon(): void {
    this.post({ type: 'abandon' });
  }

  /** @param periodS nominal time between two rows, s */
  begin(manifest: RunManifest, periodS: number): void {
    this.width = rowLead + manifest.columns.length;
    this.capacity = periodS * 1000 >= flushAfterMs ? 1 : rowsPerBatch;
    this.free.length = 0;
    this.postedAtS.length = 0;
    this.labelIndex.clear();
    this.newLabels = [];
    this.events = [];
    this.traces = new TraceBuffer();
    this.rows = 0;
    this.hasFailed = false;
    this.data = this.takeBuffer();
    this.post({ type: 'begin', manifest });
  }

  /**
   * @realtime copies one row; hands a buffer over when it is full
   * @param values one per column; NaN is NULL
   */
  append(k: number, tS: number, atMs: number, step: string, values: Float64Array): void {
    const at = this.rows * this.width;
    const { data } = this;
    data[at] = k;
    data[at + 1] = tS;
    data[at + 2] = atMs;
    data[at + 3] = this.labelOf(step);
    data.set(values, at + rowLead);
    this.rows += 1;
    if (this.rows === this.capacity) this.flush();
    else this.flushTimer ??= setTimeout(() => this.flush(), flushAfterMs);
  }

  /**
   * A trace of the scan whose row is appended next.
   *
   * @realtime copies the points
   * @param channel index among the run's trace channels
   */
  appendTrace(k: number, channel: number, points: Float32Array): void {
    this.traces.append(k, channel, points);
  }

  appendEvent(event: RunEvent): void {
    this.events.push(event);
    this.flushTimer ??= setTimeout(() => this.flush(), flushAfterMs);
  }

  /** Tells of a recorder that has fallen behind; called once a scan. */
  watch(nowS: number): void {
    const oldest = this.postedAtS[0];
    if (oldest !== undefined && nowS - oldest > behindMaxS) {
      this.fail(`No sample has reached the disk for ${behindMaxS} s.`);
    }
  }

  /**
   * Writes what is left and closes the file.
   *
   * @throws recorder.failed where the end could not be recorded
   */
  async end(end: Omit<RunEnd, 'scans'>): Promise<void> {
    if (this.threadEnd !== null) throw new DomainError('recorder.failed', this.threadEnd);
    this.flush();
    this.post({ type: 'end', end });
    const { error } = await this.ended.next();
    if (error !== null) throw new DomainError('recorder.failed', `The run file was not closed: ${error}`);
  }

  /** Ends the thread; an open file keeps what it has. */
  async close(): Promise<void> {
    this.isClosed = true;
    if (this.threadEnd !== null) return;
    const exited = new Promise((resolve) => this.worker.once('exit', resolve));
    this.post({ type: 'close' });
    await exited;
  }

  private flush(): void {
    if (this.flushTimer !== null) clearTimeout(this.flushTimer);
    this.flushTimer = null;
    if (this.rows === 0 && this.events.length === 0) return;
    const { data, rows, newLabels, events } = this;
    const traces = this.traces.take();
    const message = { type: 'batch' as const, data, rows, newLabels, events, traces };
    this.post(message, [data.buffer, ...buffersOf(traces)]);
    this.postedAtS.push(monotonicS());
    this.data = this.takeBuffer();
    this.rows = 0;
    if (newLabels.length > 0) this.newLabels = [];
    if (events.length > 0) this.events = [];
  }

  private takeBuffer(): Float64Array<ArrayBuffer> {
    return this.free.pop() ?? new Float64Array(this.capacity * this.width);
  }

  private labelOf(step: string): number {
    if (step === '') return -1;
    const known = this.labelIndex.get(step);
    if (known !== undefined) return known;
    const index = this.labelIndex.size;
    this.labelIndex.set(step, index);
    this.newLabels.push(step);
    return index;
  }

  private take(message: FromRecorder): void {
    switch (message.type) {
      case 'prepared':
        return this.prepared.ring(message);
      case 'ended':
        return this.ended.ring(message);
      case 'committed':
        this.postedAtS.shift();
        if (message.data.length === this.capacity * this.width) this.free.push(message.data);
        if (message.traces) this.traces.giveBack(message.traces);
        return;
      case 'failed':
        return this.fail(message.message);
      case 'ready':
      case 'closed':
        return;
    }
  }

  private fail(message: string): void {
    if (!this.hasFailed) this.onFailure(message);
    this.hasFailed = true;
  }

  private onThreadEnd(why: string): void {
    if (this.threadEnd !== null) return;
    this.threadEnd = `The recorder thread ended: ${why}.`;
    this.fail(this.threadEnd);
    this.prepared.ring({ type: 'prepared', error: this.threadEnd });
    this.ended.ring({ type: 'ended', error: this.threadEnd, scans: 0 });
  }

  private post(message: ToRecorder, transfer: ArrayBuffer[] = []): void {
    this.worker.postMessage(message, transfer);
  }
}
