import type { ChildProcess } from 'node:child_process';
import { loadavg } from 'node:os';
import { setTimeout as sleep } from 'node:timers/promises';
import { fileURLToPath } from 'node:url';
import { z } from 'zod';
import type { Benchmark } from '../benchmark.types.js';
import { forkProgram, nextMessage } from '../forked-program.js';
import { runningValue, scanPeriodMs, stopScenario } from './stop-scenario.js';
import { startStopServer, StopPerson, type StopServer } from './stop-server.js';

const program = (name: string) => fileURLToPath(new URL(`./${name}.js`, import.meta.url));

const [presses, pressesInFull] = [100, 1000];
const ratePerS = 200;
/** What may come on top of one scan, ms. */
const allowanceMs = 20;
const reauthenticateEveryMs = 120_000;
/** Eight rig hosts that begin at once take their time on a small computer. */
const cycleBoundMs = 180_000;
/** Between two attempts of a request, ms: waiting must not be the load. */
const attemptEveryMs = 200;

const writeSchema = z.object({ bench: z.int(), value: z.number(), atNs: z.coerce.bigint() });
const rateSchema = z.object({ answeredPerS: z.number() });

/** An emergency stop from before its HTTP request until the write in the bench's log, on rigs that run. */
export const stopLatency: Benchmark = {
  name: 'stop-latency',
  purpose:
    'Emergency stop from the HTTP request to the write at the bench, p99 of 100 presses (--full: 1,000).',
  async run({ isFull = false } = {}) {
    const benches = forkProgram(program('stop-bench'));
    const { ports } = z.object({ ports: z.array(z.int()) }).parse(await nextMessage(benches, 10_000));
    const server = await startStopServer(stopScenario(ports));
    const load = forkProgram(program('api-load'));
    try {
      const trial = await StopTrial.begin(server, benches, load);
      const latenciesMs = await trial.press(isFull ? pressesInFull : presses);
      const p99Ms = quantile(latenciesMs, 0.99);
      const about = [
        `one scan of ${scanPeriodMs} ms + ${allowanceMs} ms`,
        `median ${quantile(latenciesMs, 0.5).toFixed(1)}, p99 ${p99Ms.toFixed(1)}, worst ${quantile(latenciesMs, 1).toFixed(1)} ms of ${latenciesMs.length} presses`,
        `8 rigs running, ${trial.answeredPerS.toFixed(0)} of ${ratePerS} requests/s answered`,
        `load of the computer ${loadavg()[0]?.toFixed(1)}`,
      ];
      return {
        name: this.name,
        value: p99Ms,
        unit: 'ms',
        ratio: p99Ms / (scanPeriodMs + allowanceMs),
        against: about.join('; '),
      };
    } finally {
      load.kill();
      await server.end();
      benches.kill();
    }
  },
};

/** The smallest measured value that at least this share of all does not exceed. */
function quantile(values: readonly number[], share: number): number {
  const sorted = [...values].sort((a, b) => a - b);
  return sorted[Math.max(0, Math.ceil(share * sorted.length) - 1)] ?? NaN;
}

class StopTrial {
  answeredPerS = 0;
  /** Value of each bench's actuator, and when it took it. */
  private readonly standing: { value: number; atNs: bigint }[] = [];

  private constructor(
    private readonly server: StopServer,
    private readonly engineer: StopPerson,
    private readonly officer: StopPerson,
    benches: ChildProcess,
    load: ChildProcess,
  ) {
    benches.on('message', (message) => {
      const { bench, value, atNs } = writeSchema.parse(message);
      this.standing[bench] = { value, atNs };
    });
    load.on('message', (message) => (this.answeredPerS = rateSchema.parse(message).answeredPerS));
  }

  /** Brings every rig to a run, then begins the load. */
  static async begin(server: StopServer, benches: ChildProcess, load: ChildProcess): Promise<StopTrial> {
    const engineer = await StopPerson.signIn(server, 'engineer');
    const officer = await StopPerson.signIn(server, 'officer');
    await officer.reauthenticate();
    const trial = new StopTrial(server, engineer, officer, benches, load);
    // One after the other: a host that could not begin beside seven others is begun again by its command.
    for (const rig of server.loaded.rigs.keys()) await trial.run(rig);
    const rigIds = server.loaded.rigs.map(({ id }) => id);
    load.send({ url: server.url, cookie: engineer.cookie, rigIds, ratePerS });
    await sleep(2000);
    return trial;
  }

  /** One press after the other, each on the next rig, which is brought back to a run meanwhile. */
  async press(count: number): Promise<number[]> {
    const latenciesMs: number[] = [];
    const ready = this.server.loaded.rigs.map(() => Promise.resolve());
    let reauthenticatedMs = performance.now();
    for (let i = 0; i < count; i += 1) {
      const rig = i % ready.length;
      await ready[rig];
      // Anywhere in the scan, and not in step with what has just been waited for.
      await sleep(Math.random() * 2 * scanPeriodMs);
      latenciesMs.push(await this.pressOnce(rig));
      if (performance.now() - reauthenticatedMs > reauthenticateEveryMs) {
        reauthenticatedMs = performance.now();
        await this.officer.reauthenticate();
      }
      ready[rig] = this.resetAndRun(rig);
    }
    await Promise.all(ready);
    return latenciesMs;
  }

  private async pressOnce(rig: number): Promise<number> {
    const beganNs = process.hrtime.bigint();
    const path = `rigs/${this.idOf(rig)}/emergency-stop`;
    if (!(await this.engineer.post(path, { reason: 'Benchmark.' }))) throw new Error('A stop was refused.');
    const stopped = await until(() => {
      const at = this.standing[rig];
      return at?.value === 0 && at.atNs > beganNs ? at : null;
    });
    return Number(stopped.atNs - beganNs) / 1e6;
  }

  private async resetAndRun(rig: number): Promise<void> {
    const reset = () => this.officer.post(`rigs/${this.idOf(rig)}/reset`, { reason: 'Benchmark.' });
    await attempt(reset);
    await this.run(rig);
  }

  private async run(rig: number): Promise<void> {
    const experimentId = this.server.loaded.rigs[rig]?.experiments['hold'];
    await attempt(() => this.engineer.post(`rigs/${this.idOf(rig)}/arm`));
    await attempt(() => this.engineer.post('runs', { experimentId }));
    await until(() => (this.standing[rig]?.value === runningValue ? true : null));
  }

  private idOf(rig: number): string {
    return this.server.loaded.rigs[rig]?.id ?? '';
  }
}

function attempt(act: () => Promise<boolean>): Promise<true> {
  return until(async () => (await act()) || null, attemptEveryMs);
}

async function until<T>(find: () => T | null | Promise<T | null>, everyMs = 20): Promise<T> {
  const endMs = performance.now() + cycleBoundMs;
  for (;;) {
    const found = await find();
    if (found !== null) return found;
    if (performance.now() > endMs) throw new Error('A rig did not get there in time.');
    await sleep(everyMs);
  }
}
