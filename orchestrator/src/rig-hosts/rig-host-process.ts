import { setTimeout as sleep } from 'node:timers/promises';
import { isDeepStrictEqual } from 'node:util';
import { DomainError, type FromHost, type HostCommand } from '@cresthold/shared';
import { HostLife, type HostDeath, type HostProgram } from './supervision/host-life.js';
import { RestartBudget } from './supervision/restart-budget.js';
import type { RestartPolicy, SupervisionTiming } from './supervision/supervision-options.js';

export type HostConfiguration = Extract<HostCommand, { type: 'configure' }>;

/** What the owner of a rig host must do and is told. None of these may throw but `configuration`. */
export interface RigHostOwner {
  /** Called before each fork: what the program is, once nothing else owns the rig. Rejecting forbids the fork. */
  prepare(signal: AbortSignal): Promise<HostProgram>;
  /** Called right after a fork. */
  onForked(pid: number): void;
  /** Called after each READY: the command that configures the host. */
  configuration(): Promise<HostConfiguration>;
  onMessage(message: FromHost): void;
  /** A host died; awaited before it is begun again. Not called when the host ended as asked. */
  onDeath(death: HostDeath): Promise<void>;
  onLog(level: 'info' | 'warn' | 'error', text: string): void;
}

export type SupervisorState =
  | { name: 'down' }
  | { name: 'starting' }
  | { name: 'up' }
  | { name: 'restarting'; because: string }
  /** No further attempt is made until a person begins again. */
  | { name: 'failed'; because: string }
  | { name: 'ending' };

const stateTexts: Record<SupervisorState['name'], string> = {
  down: 'is not running',
  starting: 'is starting',
  up: 'is up',
  restarting: 'was lost and is begun again',
  failed: 'has failed',
  ending: 'is ending',
};

/**
 * Keeps one rig host alive: begins it, begins it again within a budget when it dies after READY, and ends
 * it. A host that dies before READY is not begun again: it would only die again.
 */
export class RigHostProcess {
  private life: HostLife | null = null;
  private current: SupervisorState = { name: 'down' };
  private readonly budget: RestartBudget;
  private readonly abort = new AbortController();
  /** Settles when the keeping of the present series of lives is over. */
  private keeping: Promise<void> = Promise.resolve();

  constructor(
    private readonly owner: RigHostOwner,
    private readonly timing: SupervisionTiming,
    restartPolicy: RestartPolicy,
  ) {
    this.budget = new RestartBudget(restartPolicy);
  }

  get state(): SupervisorState {
    return this.current;
  }

  /** Why the host is not up, for people; null where it is. */
  get fault(): string | null {
    const { current } = this;
    if (current.name === 'up') return null;
    return `The rig host ${stateTexts[current.name]}.${'because' in current ? ` ${current.because}` : ''}`;
  }

  get pid(): number | undefined {
    return this.life?.pid;
  }

  /**
   * Begins the host, by hand or at start of the server.
   *
   * @returns when the host is configured
   * @throws host.unavailable when it could not be brought up
   */
  async start(): Promise<void> {
    if (this.current.name !== 'down' && this.current.name !== 'failed') return;
    this.budget.refill();
    this.current = { name: 'starting' };
    await this.bringUp();
    if (this.state.name !== 'up') throw this.unavailable();
  }

  /** @throws host.unavailable, host.timeout, or whatever the host answers */
  async request(command: HostCommand): Promise<unknown> {
    if (this.current.name !== 'up' || !this.life) throw this.unavailable();
    return this.life.request(command);
  }

  /**
   * Configures the host that is up anew; begins one that is down or has failed. A host that refuses is ended.
   *
   * @throws rig.busy, and host.unavailable where a host could not be begun
   */
  async reconfigure(): Promise<void> {
    if (this.current.name === 'down' || this.current.name === 'failed') return this.start();
    // A host that is just being brought up reads its documents when it is READY.
    const { life } = this;
    if (this.current.name !== 'up' || !life) return;
    try {
      await life.configure(await this.owner.configuration());
    } catch (error) {
      if (error instanceof DomainError && error.code === 'rig.busy') throw error;
      await this.giveUp(life, error);
    }
  }

  /** A person has looked at what happened: earlier deaths no longer count against a restart. */
  forgetDeaths(): void {
    this.budget.refill();
  }

  /** Ends the host in order, by force after the bound, and begins it no more. */
  async stop(): Promise<void> {
    this.current = { name: 'ending' };
    this.abort.abort();
    const death = await this.life?.shutDown();
    if (death && death.exitCode !== 0) {
      const how = death.signal ?? `exit code ${death.exitCode}`;
      this.owner.onLog('error', `The rig host ended without having brought its rig to rest (${how}).`);
    }
    await this.keeping;
  }

  /** One attempt. Ends in `up` or `failed`, or, when the host dies while it is configured, in `outlive`. */
  private async bringUp(): Promise<void> {
    let life: HostLife;
    try {
      const program = await this.owner.prepare(this.abort.signal);
      if (this.isEnding()) return;
      life = this.begin(program);
      await life.ready;
    } catch (error) {
      this.fail(`It could not be begun: ${textOf(error)}`);
      return;
    }
    this.keeping = life.ended.then((death) => this.outlive(life, death));
    try {
      const sent = await this.owner.configuration();
      await life.configure(sent);
      if (this.isEnding()) return;
      this.current = { name: 'up' };
      await this.catchUp(life, sent);
    } catch (error) {
      // A refusal would come again; a death on the way is one like any other.
      if (!life.isDead) await this.giveUp(life, error);
    }
  }

  /** What was stored while the host was being configured, e.g. an emergency stop, reaches it as well. */
  private async catchUp(life: HostLife, sent: HostConfiguration): Promise<void> {
    const stored = await this.owner.configuration();
    if (isSameConfiguration(sent, stored)) return;
    await life.configure(stored);
    await this.catchUp(life, stored);
  }

  /** A host that drives its rig by other documents than the stored ones is ended: it is brought to rest. */
  private async giveUp(life: HostLife, error: unknown): Promise<void> {
    this.fail(`It refused its configuration: ${textOf(error)}`);
    await life.shutDown();
  }

  private begin(program: HostProgram): HostLife {
    const life = new HostLife(program, this.timing, {
      onMessage: (message) => this.owner.onMessage(message),
      onFault: (text) => this.owner.onLog('error', text),
    });
    this.life = life;
    if (life.pid !== undefined) this.owner.onForked(life.pid);
    return life;
  }

  private fail(because: string): void {
    if (this.isEnding()) return;
    this.current = { name: 'failed', because };
    this.owner.onLog('error', `The rig host has failed and is not begun again. ${because}`);
  }

  /** A host that had been READY is gone. */
  private async outlive(life: HostLife, death: HostDeath): Promise<void> {
    if (this.life === life) this.life = null;
    if (death.kind === 'asked' || this.isEnding()) return;
    this.current = { name: 'restarting', because: death.message };
    await this.owner.onDeath(death).catch((error: unknown) => {
      this.owner.onLog('error', `Its death could not be recorded: ${textOf(error)}`);
    });
    if (this.isEnding()) return;
    const delayMs = this.budget.take(performance.now());
    if (delayMs === null) {
      this.fail(`It died too often. Last: ${death.message}`);
      return;
    }
    this.owner.onLog('warn', `${death.message} It is begun again in ${delayMs} ms.`);
    await sleep(delayMs, undefined, { signal: this.abort.signal }).catch(() => undefined);
    if (!this.isEnding()) await this.bringUp();
  }

  private isEnding(): boolean {
    return this.current.name === 'ending';
  }

  private unavailable(): DomainError {
    return new DomainError('host.unavailable', this.fault ?? undefined);
  }
}

function textOf(error: unknown): string {
  return error instanceof Error ? error.message : String(error);
}

/** The host itself adds to what followed a trip: that alone is no other configuration. */
function isSameConfiguration(a: HostConfiguration, b: HostConfiguration): boolean {
  const strip = ({ trip, ...rest }: HostConfiguration) => ({ ...rest, tripped: [trip?.cause, trip?.at] });
  return isDeepStrictEqual(strip(a), strip(b));
}
