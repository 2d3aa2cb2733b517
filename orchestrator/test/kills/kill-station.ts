import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { seekExperiment } from '../end-to-end/seek-experiment.js';
import { password, Station } from '../harness/station.js';
import { until } from '../harness/until.js';
import { benchTimeS, missingMs, safeSinceMs, trimAt, writesOutside } from './bench-facts.js';
import { runFileFacts } from './run-file-facts.js';
import { WireProxy } from './wire-proxy.js';

/** Bench seconds per second. */
export const speed = 2;
const seekStart = 40;
const disturbedMax = 20;

/** What a loss did, measured from outside. */
export interface Loss {
  what: string;
  round: number;
  /** Where the damper was when the event came, %. */
  fromTrim: number;
  /** From the event until the damper was at safe to stay. */
  safeAfterMs: number;
  /** The same by the clock of the bench, s of bench time. */
  safeAfterBenchS: number;
  /** What the host had still scanned and is not in the file. */
  missingMs: number;
  longestGapMs: number;
  scans: number;
  runStatus: string;
  tripCause: string;
  isFileIntact: boolean;
  writesOutside: number;
}

/** A station with approved limits and a seek that goes on until something ends it. */
export class KillStation {
  private experimentId = '';
  /** Runs that tripped before the event, because the machine was too busy. */
  disturbed = 0;

  private constructor(
    readonly station: Station,
    readonly wire: WireProxy,
  ) {}

  static async open(): Promise<KillStation> {
    let wire: WireProxy | null = null;
    const station = await Station.open(['--seed', '11', '--speed', String(speed)], async (benchPort) => {
      wire = await WireProxy.open(benchPort);
      return wire.port;
    });
    if (!wire) throw new Error('The wire was not opened.');
    const kills = new KillStation(station, wire);
    await kills.setUp();
    return kills;
  }

  async close(): Promise<void> {
    this.wire.restore();
    await this.station.close();
    this.wire.close();
  }

  hostPid(): number {
    const file = join(this.station.dataFolder, 'rigs', `${this.station.rigId}.pid`);
    return (JSON.parse(readFileSync(file, 'utf8')) as { pid: number }).pid;
  }

  /**
   * Starts a seek, lets `event` happen in its middle, and measures what followed.
   *
   * @param mend brings back what the event took, once the bench is at safe
   */
  async lose(what: string, round: number, event: () => void, mend: () => Promise<void>): Promise<Loss> {
    const { station } = this;
    // Another moment of the dither in each round.
    const runId = await this.seek(1_000 + 170 * round);
    const eventAtMs = Date.now();
    event();
    const safeAtMs = await until('the damper is at safe', () => this.safeToStay(eventAtMs), 15_000, 100);
    const log = station.bench.log();
    await mend();
    const run = await until(
      'the run is marked',
      async () => {
        const row = await station.as('reader').get(`runs/${runId}`);
        return row.endedAt === null ? null : row;
      },
      60_000,
    );
    const status = await station.untilPhase('tripped', 60_000);
    const facts = runFileFacts(join(station.dataFolder, 'runs', `${runId}.sqlite`), eventAtMs);
    const limit = station.entry.envelope.content.limits[0];
    await this.reset();
    return {
      what,
      round,
      fromTrim: trimAt(log, eventAtMs),
      safeAfterMs: safeAtMs - eventAtMs,
      safeAfterBenchS: benchTimeS(log, safeAtMs) - benchTimeS(log, eventAtMs),
      missingMs: missingMs(log, facts.lastAtMs, eventAtMs),
      longestGapMs: facts.longestGapMs,
      scans: facts.scans,
      runStatus: run.status,
      tripCause: (status as { trip: { cause: string } }).trip.cause,
      isFileIntact: facts.isIntact,
      writesOutside: writesOutside(station.bench.log(), limit?.min ?? NaN, limit?.max ?? NaN),
    };
  }

  /** Starts the server again; sessions outlive it, its address does not. */
  async restartServer(): Promise<void> {
    await this.station.startServer();
    for (const client of this.station.clients.values()) client.baseUrl = this.station.server.url;
  }

  /**
   * Starts a run and lets it seek for a while. Where a machine that is too busy holds up the rig host for
   * longer than the burner's watchdog allows, the rig trips by itself: that is right, but no round.
   *
   * @returns id of the run that seeks
   */
  private async seek(forMs: number): Promise<string> {
    const { station } = this;
    for (;;) {
      if ((await station.status()).phase === 'tripped') await this.reset();
      await station.arm('engineer', 40_000);
      const request = { experimentId: this.experimentId };
      const { body } = await station.as('engineer').expect(202, 'POST', 'runs', request);
      const hasBegun = async () => {
        const { phase, activeSteps } = await station.status();
        return phase === 'tripped' || activeSteps.includes('seek');
      };
      await until('the seek is under way', hasBegun);
      await new Promise((resolve) => setTimeout(resolve, forMs));
      if ((await station.status()).phase === 'running') return body.id;
      this.disturbed += 1;
      if (this.disturbed > disturbedMax) throw new Error('The machine is too busy for this test.');
    }
  }

  private safeToStay(eventAtMs: number): number | null {
    const sinceMs = safeSinceMs(this.station.bench.log(), eventAtMs);
    const staysMs = 1_000;
    return sinceMs !== null && Date.now() - sinceMs > staysMs ? sinceMs : null;
  }

  private async reset(): Promise<void> {
    const path = `rigs/${this.station.rigId}/reset`;
    const reason = 'The test is over.';
    await this.station.as('officer').reauthenticate(password);
    await until(
      'the trip is reset',
      async () => (await this.station.as('officer').call('POST', path, { reason })).status === 200,
      40_000,
      250,
    );
  }

  private async setUp(): Promise<void> {
    const { station } = this;
    await station.makePeople();
    await station.makeRig();
    await station.approveEnvelope();
    const objectiveId = await station.makeObjective();
    const content = seekExperiment({ objectiveId, startAt: seekStart, seekForS: 600, surveyPoints: 0 });
    this.experimentId = await station.makeExperiment(content);
  }
}
