import {
  DomainError,
  type CalibrationInForce,
  type EnvelopeInForce,
  type FromHost,
  type Readings,
  type Rig,
  type RunColumn,
  type RunEventBody,
  type RunOrder,
  type RunStatus,
  type ScanEngine,
  type ScanInput,
  type ScanOutput,
  type Trip,
} from '@cresthold/shared';
import { runFileSchemaVersion, type RunManifest } from '../recordings/run-file/index.js';
import type { Recorder } from './recorder.js';
import type { ScanSink } from './scan-loop.js';
import { softwareVersions } from './software-versions.js';
import { within } from './within.js';

/** Longest wait for the recorder to close a file, ms. */
const closeBoundMs = 10_000;

export interface RunRecordingOwner {
  send(message: FromHost): void;
  onRunBegun(run: { id: string; columns: readonly RunColumn[] }): void;
  onRunOver(): void;
  log(level: 'info' | 'warn' | 'error', text: string): void;
}

/** The status of a run after an event, where the event changes it. */
const statusAfter: Partial<Record<RunEventBody['type'], RunStatus>> = {
  'run.started': 'running',
  'run.paused': 'paused',
  'run.resumed': 'running',
  'run.stopping': 'stopping',
  /** Its stop action is still recorded; it ends `tripped`. */
  'rig.tripped': 'stopping',
};

/** The run under way: numbers its rows and events, records them, and closes its file at its end. */
export class RunRecording implements ScanSink {
  private runId: string | null = null;
  private isStarting = false;
  private k = 0;
  private sequence = 0;
  private step = '';
  private notes: RunEventBody[] = [];
  /** Indices of the rig's trace channels, and the readings that hold them while a run is open. */
  private readonly traceIndices: readonly number[];
  private readings: Readings | null = null;
  /** Settles when the file of the last run is closed. */
  private closing: Promise<void> = Promise.resolve();

  constructor(
    private readonly recorder: Recorder,
    private readonly rig: Rig,
    private readonly calibrations: readonly CalibrationInForce[],
    private readonly owner: RunRecordingOwner,
  ) {
    this.traceIndices = rig.channels.flatMap(({ kind }, index) => (kind === 'trace' ? [index] : []));
  }

  get isOpen(): boolean {
    return this.runId !== null || this.isStarting;
  }

  /** Resolves when no file is open any more. */
  async closed(): Promise<void> {
    await this.closing;
  }

  /**
   * Makes the run file, then has the engine start; where either fails nothing has changed.
   *
   * @throws rig.busy, recorder.failed, or what the engine throws
   */
  async start(order: RunOrder, engine: ScanEngine, envelope: EnvelopeInForce | null): Promise<void> {
    if (this.isOpen) throw new DomainError('rig.busy');
    if (envelope === null) throw new DomainError('envelope.none-in-force');
    this.isStarting = true;
    try {
      await this.closing;
      await this.recorder.prepare(order.file);
      this.begin(order, engine, envelope);
    } finally {
      this.isStarting = false;
    }
  }

  /** Keeps something that happened beside the engine; it gets the time of the next scan of a run. */
  note(body: RunEventBody): void {
    if (this.isOpen) this.notes.push(body);
  }

  /** @realtime but for the end of the run */
  onScan(_input: ScanInput, output: ScanOutput): void {
    if (this.runId === null) return;
    for (const event of output.events) this.addEvent(event);
    if (output.runTS !== null && this.notes.length > 0) this.addNotes(output.runTS, _input.atMs);
    if (output.row !== null && output.runTS !== null) {
      this.k += 1;
      this.appendTraces();
      this.recorder.append(this.k, output.runTS, _input.atMs, this.step, output.row);
    }
    this.recorder.watch(_input.tS);
    if (output.runEnded !== null) this.finish({ ...output.runEnded });
  }

  /**
   * Ends the record of a run that the engine can no longer end.
   *
   * @param trip what tripped the rig in this run; such a run ends `tripped` and says that its stop was not over
   */
  interrupt(reason: string, trip: Trip | null): void {
    if (this.runId === null) return;
    const status = trip === null ? 'interrupted' : 'tripped';
    const why = trip === null ? reason : `${trip.message} ${reason}`;
    this.finish({ status, verdict: 'inconclusive', reason: why, results: {} });
  }

  private begin(order: RunOrder, engine: ScanEngine, envelope: EnvelopeInForce): void {
    let columns: readonly RunColumn[];
    try {
      columns = engine.startRun(order);
    } catch (error) {
      this.recorder.abandon();
      throw error;
    }
    this.runId = order.runId;
    this.notes = [];
    this.readings = engine.readings;
    this.k = 0;
    this.sequence = 0;
    this.step = '';
    this.recorder.begin(this.manifestOf(order, envelope, columns), this.rig.periodMs / 1000);
    this.owner.onRunBegun({ id: order.runId, columns });
  }

  /** Those that are good, before the row of their scan: both go to the file in one piece. */
  private appendTraces(): void {
    for (let i = 0; i < this.traceIndices.length; i += 1) {
      const trace = this.readings?.goodTrace(this.traceIndices[i] as number);
      if (trace) this.recorder.appendTrace(this.k, i, trace.points);
    }
  }

  private addEvent({ runTS, atMs, body }: ScanOutput['events'][number]): void {
    const runId = this.runId ?? '';
    this.sequence += 1;
    const event = { sequence: this.sequence, tS: runTS, at: new Date(atMs).toISOString(), body };
    this.recorder.appendEvent(event);
    this.owner.send({ type: 'run-event', runId, event });
    const status = statusAfter[body.type];
    if (status !== undefined) this.owner.send({ type: 'run-status', runId, status });
    if (body.type === 'step.started' || body.type === 'step.ended') this.followStep(body);
  }

  private addNotes(runTS: number, atMs: number): void {
    for (const body of this.notes) this.addEvent({ runTS, atMs, body });
    this.notes = [];
  }

  private followStep(body: { type: string; step: string }): void {
    const active = new Set(this.step === '' ? [] : this.step.split(' '));
    if (body.type === 'step.started') active.add(body.step);
    else active.delete(body.step);
    this.step = [...active].join(' ');
  }

  private finish(end: NonNullable<ScanOutput['runEnded']>): void {
    const runId = this.runId ?? '';
    const scans = this.k;
    this.runId = null;
    this.owner.onRunOver();
    this.closing = this.close(end).then(() =>
      this.owner.send({ type: 'run-ended', runId, ...end, results: { ...end.results }, scans }),
    );
  }

  private async close(end: NonNullable<ScanOutput['runEnded']>): Promise<void> {
    try {
      const isClosed = await within(
        this.recorder.end(end).then(() => true),
        closeBoundMs,
        false,
      );
      if (!isClosed) this.owner.log('error', 'The recorder did not close the run file in time.');
    } catch (error) {
      this.owner.log('error', error instanceof Error ? error.message : String(error));
    }
  }

  private manifestOf(order: RunOrder, envelope: EnvelopeInForce, columns: readonly RunColumn[]): RunManifest {
    return {
      schema_version: runFileSchemaVersion,
      run: { id: order.runId, startedBy: order.by, startedAt: new Date().toISOString() },
      experiment: order.experiment,
      objective: order.objective,
      rig: this.rig,
      envelope,
      calibrations: [...this.calibrations],
      columns: [...columns],
      software: softwareVersions(),
      extra: order.manifest,
    };
  }
}
