import { fork, type ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import { resolve } from 'node:path';
import { setTimeout as delay } from 'node:timers/promises';
import Database from 'better-sqlite3';
import {
  fromHostSchema,
  type EnvelopeInForce,
  type FromHost,
  type HostCommand,
  type Rig,
  type RigStatus,
} from '@cresthold/shared';
import { testEnvelope, testGraph } from './test-rig.js';

const program = resolve(__dirname, '../../dist/rig-host/main.js');

type Of<T extends FromHost['type']> = Extract<FromHost, { type: T }>;

/** The built rig host, forked as the server forks it; every message it sends must be a known one. */
export class HostHarness {
  readonly messages: FromHost[] = [];
  readonly unknown: unknown[] = [];
  readonly exited: Promise<{ code: number | null; signal: string | null }>;
  readonly child: ChildProcess;
  private readonly alive: NodeJS.Timeout;
  private nextRequestId = 1;

  private constructor(execArgv: string[]) {
    this.child = fork(program, {
      serialization: 'advanced',
      stdio: ['ignore', 'ignore', execArgv.length > 0 ? 'ignore' : 'inherit', 'ipc'],
      execArgv,
    });
    this.child.on('message', (value) => {
      const parsed = fromHostSchema.safeParse(value);
      if (parsed.success) this.messages.push(parsed.data);
      else this.unknown.push(value);
    });
    this.exited = once(this.child, 'exit').then(([code, signal]) => ({ code, signal }));
    this.alive = setInterval(() => this.send({ type: 'server-alive' }), 500);
    void this.exited.then(() => clearInterval(this.alive));
  }

  /** @param execArgv for a fault planted by the test; what it prints is then left out */
  static async start(execArgv: string[] = []): Promise<HostHarness> {
    const host = new HostHarness(execArgv);
    await host.until(() => host.last('ready'), 'ready');
    return host;
  }

  static async configured(
    rig: Rig,
    envelope: EnvelopeInForce | null = testEnvelope(),
    execArgv: string[] = [],
  ): Promise<HostHarness> {
    const host = await HostHarness.start(execArgv);
    await host.ask({ type: 'configure', rig, envelope, trip: null, isLockedOut: false });
    return host;
  }

  /** From now on the server says nothing, but the channel stays open. */
  fallSilent(): void {
    clearInterval(this.alive);
  }

  send(message: unknown): void {
    if (this.child.connected) this.child.send(message as object, () => undefined);
  }

  /** @returns the error of the reply, null where the command was taken */
  async reply(command: HostCommand): Promise<Of<'reply'>['error']> {
    const requestId = this.nextRequestId;
    this.nextRequestId += 1;
    this.send({ type: 'command', requestId, command });
    const found = await this.until(
      () => this.of('reply').find((reply) => reply.requestId === requestId),
      `reply to ${command.type}`,
    );
    return found.error;
  }

  async ask(command: HostCommand): Promise<void> {
    expect({ command: command.type, error: await this.reply(command) }).toEqual({
      command: command.type,
      error: null,
    });
  }

  of<T extends FromHost['type']>(type: T): Of<T>[] {
    return this.messages.filter((message): message is Of<T> => message.type === type);
  }

  last<T extends FromHost['type']>(type: T): Of<T> | undefined {
    return this.of(type).at(-1);
  }

  get status(): RigStatus | undefined {
    return this.last('status')?.status;
  }

  async untilStatus(holds: (status: RigStatus) => boolean, what: string): Promise<RigStatus> {
    return this.until(() => this.of('status').findLast(({ status }) => holds(status))?.status, what);
  }

  /** Waits until something is there; the bound is for a hung test, not for speed. */
  async until<T>(find: () => T | undefined | false, what: string, boundMs = 25_000): Promise<T> {
    const endMs = performance.now() + boundMs;
    for (;;) {
      const found = find();
      if (found !== undefined && found !== false) return found;
      if (performance.now() > endMs) {
        const tail = JSON.stringify(this.messages.filter((m) => m.type !== 'telemetry').slice(-3));
        throw new Error(`Waited in vain for: ${what}. Last messages: ${tail}`);
      }
      await delay(10);
    }
  }

  /** Repeats a command until nothing forbids it any more; a hiccup of a loaded computer may for a while. */
  async askUntilTaken(command: HostCommand): Promise<void> {
    let error = await this.reply(command);
    for (let attempt = 0; attempt < 100 && error !== null; attempt += 1) {
      await delay(100);
      error = await this.reply(command);
    }
    expect({ command: command.type, error }).toEqual({ command: command.type, error: null });
  }

  arm(): Promise<void> {
    return this.askUntilTaken({ type: 'arm', by: 'engineer' });
  }

  /** Arms and starts a run that moves the air trim to 4 and holds it. */
  async startRun(runId: string, file: string, holdS: number): Promise<void> {
    await this.arm();
    const experiment = { id: 'experiment-1', title: 'Hold', version: 1, graph: testGraph(holdS) };
    const order = { runId, file, by: 'engineer', experiment, objective: null, manifest: {} };
    await this.ask({ type: 'start-run', order });
  }

  /** Ends what a failed test may have left. */
  async end(): Promise<void> {
    this.child.kill('SIGKILL');
    await this.exited;
  }
}

export interface StoredRun {
  ks: number[];
  tS: number[];
  airTrim: (number | null)[];
  applied: (number | null)[];
  oxygen: (number | null)[];
  eventTypes: string[];
  end: { status: string; verdict: string; reason: string; scans: number } | null;
}

/** Reads a run file with plain SQL. */
export function storedRun(file: string): StoredRun {
  const plain = new Database(file, { readonly: true });
  const column = <T>(sql: string) => plain.prepare(sql).pluck().all() as T[];
  const end = column<string>("SELECT value FROM manifest WHERE name = 'end'")[0];
  const stored: StoredRun = {
    ks: column('SELECT k FROM scan ORDER BY k'),
    tS: column('SELECT t_s FROM scan ORDER BY k'),
    airTrim: column('SELECT airTrim FROM scan ORDER BY k'),
    applied: column('SELECT "airTrim.applied" FROM scan ORDER BY k'),
    oxygen: column('SELECT oxygen FROM scan ORDER BY k'),
    eventTypes: column('SELECT type FROM event ORDER BY sequence'),
    end: end === undefined ? null : (JSON.parse(end) as StoredRun['end']),
  };
  expect(plain.pragma('integrity_check', { simple: true })).toBe('ok');
  plain.close();
  return stored;
}

/** Rows are numbered from 1 without a gap, and their time grows. */
export function expectContinuous(run: StoredRun): void {
  expect(run.ks).toEqual(run.ks.map((_, i) => i + 1));
  expect(run.tS.every((tS, i) => i === 0 || tS > (run.tS[i - 1] ?? Infinity))).toBe(true);
}

/** The way from 4 to rest is in the rows, and the last one was read at rest. */
export function expectRestRecorded(run: StoredRun): void {
  const from = run.airTrim.lastIndexOf(4);
  const way = run.airTrim.slice(from + 1);
  expect(way.length).toBeGreaterThan(2);
  expect(way.some((value) => value !== null && value > 0 && value < 4)).toBe(true);
  expect(way.at(-1)).toBe(0);
}
