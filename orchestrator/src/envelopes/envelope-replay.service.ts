import { Injectable } from '@nestjs/common';
import {
  DomainError,
  EnvelopeReplay,
  type EnvelopeContent,
  type ReplayReport,
  type RunEvent,
} from '@cresthold/shared';
import { refuseFaults } from '../documents/prefix-faults.js';
import type { RunEntity } from '../recordings/entities/run.entity.js';
import type { RunFileReader } from '../recordings/run-file/index.js';
import { RunReader } from '../recordings/run-reader.service.js';
import { RunRecords } from '../recordings/run-records.service.js';
import { RigStore } from '../rigs/rig-store.js';
import type { EnvelopeReplayAnswer, EnvelopeReplayOrder, ReplayedRun } from './dto/envelope-replay.dto.js';
import { envelopeFaults } from './envelope-faults.js';

/** Most scans of one replay: a request must end. */
const scansMax = 1_000_000;

/** Replays drafts on recorded runs. */
@Injectable()
export class EnvelopeReplayService {
  constructor(
    private readonly rigs: RigStore,
    private readonly records: RunRecords,
    private readonly reader: RunReader,
  ) {}

  /**
   * What an envelope would have done in recorded runs; changes nothing.
   *
   * @throws rig.not-found, request.invalid where the draft has faults or a run is none of this rig
   * @throws run.not-found
   */
  async replay(
    rigId: string,
    { content, runIds, lastRuns }: EnvelopeReplayOrder,
  ): Promise<EnvelopeReplayAnswer> {
    const { content: rig } = await this.rigs.get(rigId);
    refuseFaults(envelopeFaults(content, rig));
    const runs = runIds ? await this.named(rigId, runIds) : await this.last(rigId, lastRuns);
    const replayed: ReplayedRun[] = [];
    let scans = 0;
    for (const run of runs) {
      const one = await this.replayRun(content, run, scansMax - scans);
      scans += one.report?.scans ?? 0;
      replayed.push(one);
    }
    return { runs: replayed, scans, scansMax };
  }

  private async named(rigId: string, runIds: readonly string[]): Promise<RunEntity[]> {
    const runs: RunEntity[] = [];
    for (const [index, id] of [...new Set(runIds)].entries()) {
      const run = await this.records.get(id);
      if (run.rigId === rigId) runs.push(run);
      else refuseFaults([{ field: `runIds[${index}]`, message: `Run ${id} is of another rig.` }]);
    }
    return runs;
  }

  private async last(rigId: string, count: number): Promise<RunEntity[]> {
    // One may still be going on.
    const runs = await this.records.list({ rigId }, null, count + 1);
    return runs.filter(({ endedAt }) => endedAt !== null).slice(0, count);
  }

  private async replayRun(content: EnvelopeContent, run: RunEntity, scansLeft: number): Promise<ReplayedRun> {
    const { id: runId, experimentTitle: title, startedAt, status, envelopeVersion } = run;
    const head = { runId, title, startedAt, status, envelopeVersion };
    if (scansLeft <= 0) {
      const note = `Not replayed: one replay judges at most ${scansMax} scans. Choose fewer runs.`;
      return { ...head, report: null, note };
    }
    try {
      const { report, isCut } = await this.reader.read(runId, (file) =>
        replayFile(content, file, run, scansLeft),
      );
      const cut = `Cut after ${report.scans} scans, at ${report.untilTS.toFixed(1)} s: one replay judges at most ${scansMax}.`;
      return { ...head, report, note: isCut ? cut : null };
    } catch (error) {
      if (!(error instanceof DomainError) || error.code !== 'run.no-samples') throw error;
      return { ...head, report: null, note: 'This run has no samples.' };
    }
  }
}

async function replayFile(
  content: EnvelopeContent,
  file: RunFileReader,
  { status }: RunEntity,
  scansLeft: number,
): Promise<{ report: ReplayReport; isCut: boolean }> {
  const { rig, columns } = await file.manifest();
  const events = await file.events();
  const replay = new EnvelopeReplay(content, { rig, columns });
  let next = 0;
  let scans = 0;
  for await (const { tS, row } of file.scans(columns)) {
    if (scans === scansLeft)
      return { report: replay.report({ status, trip: firstTrip(events) }), isCut: true };
    for (let event = events[next]; event && event.tS <= tS; event = events[++next]) {
      replay.event(event.body, event.tS);
    }
    replay.scan(tS, row);
    scans += 1;
  }
  return { report: replay.report({ status, trip: firstTrip(events) }), isCut: false };
}

function firstTrip(events: readonly RunEvent[]): { cause: string; tS: number } | null {
  for (const { body, tS } of events) if (body.type === 'rig.tripped') return { cause: body.cause, tS };
  return null;
}
