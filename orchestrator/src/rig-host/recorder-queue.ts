import { rm } from 'node:fs/promises';
import { setTimeout as delay } from 'node:timers/promises';
import type { RunEvent } from '@cresthold/shared';
import { RunFileWriter, type RunEnd, type ScanBatch, type TraceBatch } from '../recordings/run-file/index.js';
import type { FromRecorder, ToRecorder } from './recorder-messages.js';
import { buffersOf } from './trace-buffer.js';

interface Held {
  batch: ScanBatch & { data: Float64Array<ArrayBuffer> };
  events: RunEvent[];
  traces: TraceBatch | null;
}

/** How often the last rows are tried again before the end of a run is given up. */
const endAttempts = 3;
const endRetryMs = 300;

/**
 * The recorder's side of the messages: commits each batch at once, and keeps what could not be written
 * until it can.
 */
export class RecorderQueue {
  private writer: RunFileWriter | null = null;
  private file = '';
  private isBegun = false;
  private readonly labels: string[] = [];
  private held: Held[] = [];

  constructor(private readonly post: (message: FromRecorder, transfer?: ArrayBuffer[]) => void) {}

  async take(message: ToRecorder): Promise<void> {
    switch (message.type) {
      case 'prepare':
        return this.prepare(message.file);
      case 'begin':
        return this.attempt(() => this.begin(message.manifest));
      case 'batch':
        this.labels.push(...message.newLabels);
        this.hold(message);
        return this.attempt(() => this.commitHeld());
      case 'end':
        return this.end(message.end);
      case 'abandon':
        return this.abandon();
      case 'close':
        await this.writer?.close().catch(() => undefined);
        this.post({ type: 'closed' });
    }
  }

  private async prepare(file: string): Promise<void> {
    this.file = file;
    this.labels.length = 0;
    this.held = [];
    this.isBegun = false;
    try {
      this.writer = await RunFileWriter.create(file);
      this.post({ type: 'prepared', error: null });
    } catch (error) {
      this.post({ type: 'prepared', error: messageOf(error) });
    }
  }

  private async begin(manifest: Parameters<RunFileWriter['begin']>[0]): Promise<void> {
    await this.writer?.begin(manifest);
    this.isBegun = true;
  }

  private hold({ data, rows, events, traces }: Extract<ToRecorder, { type: 'batch' }>): void {
    this.held.push({ batch: { data, rows, labels: this.labels }, events, traces });
  }

  private async commitHeld(): Promise<void> {
    if (this.writer === null || !this.isBegun) throw new Error('The run file was never begun.');
    for (let next = this.held[0]; next !== undefined; next = this.held[0]) {
      await this.writer.append(next.batch, next.events, next.traces);
      this.held.shift();
      const { data } = next.batch;
      const { traces } = next;
      this.post({ type: 'committed', data, traces }, [data.buffer, ...buffersOf(traces)]);
    }
  }

  private async end(end: Omit<RunEnd, 'scans'>): Promise<void> {
    const { writer } = this;
    this.writer = null;
    if (writer === null) return this.post({ type: 'ended', error: 'No run file is open.', scans: 0 });
    for (let attempt = 1; ; attempt += 1) {
      try {
        this.writer = writer;
        await this.commitHeld();
        const { scans } = await writer.end(end);
        this.writer = null;
        return this.post({ type: 'ended', error: null, scans });
      } catch (error) {
        if (attempt === endAttempts) return this.post({ type: 'ended', error: messageOf(error), scans: 0 });
        await delay(endRetryMs);
      }
    }
  }

  private async abandon(): Promise<void> {
    await this.writer?.close().catch(() => undefined);
    this.writer = null;
    await rm(this.file, { force: true });
  }

  private async attempt(work: () => Promise<void>): Promise<void> {
    try {
      await work();
    } catch (error) {
      this.post({ type: 'failed', message: messageOf(error) });
    }
  }
}

const messageOf = (error: unknown): string => (error instanceof Error ? error.message : String(error));
