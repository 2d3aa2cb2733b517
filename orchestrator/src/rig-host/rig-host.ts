import { setTimeout as delay } from 'node:timers/promises';
import { loadRegistry, shippedRegistry } from '@cresthold/adapters';
import { DomainError, type HostCommand } from '@cresthold/shared';
import { Recorder } from './recorder.js';
import { RigSession } from './rig-session.js';
import { ServerLink } from './server-link.js';
import { within } from './within.js';

/** Longest time in which a stop in order may bring the rig to rest, ms; the rig's watchdog is behind it. */
const restBoundMs = 25_000;
/** The same after a fault of the program, ms. */
const restAfterFaultMs = 5_000;
const closeBoundMs = 12_000;
/** How long every connection may be down on the way to rest before the rig is left to its watchdog, ms. */
const lostBoundMs = 3_000;
const drainBoundMs = 500;
const pollMs = 10;

/** Exit codes of the program. */
export const exitCodes = { inOrder: 0, bug: 70, notAtRest: 75 } as const;

/** The program of one rig: takes commands, owns the session, and has one path to its end. */
export class RigHost {
  private session: RigSession | null = null;
  private ending: Promise<void> | null = null;
  private readonly link: ServerLink;
  private readonly recorder: Recorder;
  private adapters = shippedRegistry.adapters;

  /**
   * @param plugIns adapters from outside: absolute paths, or names of installed packages
   * @param exit ends the process; called once
   */
  constructor(
    channel: NodeJS.Process,
    private readonly plugIns: readonly string[],
    private readonly exit: (code: number) => void,
  ) {
    this.recorder = new Recorder((message) => this.onRecorderFailed(message));
    this.link = new ServerLink(channel, {
      onCommand: (command) => this.take(command),
      onServerGone: () => this.onServerGone(),
    });
  }

  /** Says READY once the adapters are there and the recorder can take a run. */
  async announce(): Promise<void> {
    await this.loadAdapters();
    await this.recorder.ready;
    this.link.send({ type: 'ready', pid: process.pid });
  }

  /** A broken plug-in is told; only a rig whose wires need it is the worse for it. */
  private async loadAdapters(): Promise<void> {
    const registry = await loadRegistry(this.plugIns);
    this.adapters = registry.adapters;
    for (const { state, reference, error } of registry.listings) {
      if (state === 'broken') this.link.log('warn', `Plug-in ${reference} is broken: ${error?.message}`);
    }
  }

  /** Brings the rig to rest in order and ends the process. */
  shutDown(reason: string): Promise<void> {
    this.ending ??= this.endInOrder(reason, exitCodes.inOrder, restBoundMs);
    return this.ending;
  }

  /** A fault of the program itself: trip, stop as far as that still works, and end. */
  onBug(error: unknown): void {
    console.error(error);
    this.link.log('error', `The rig host met a fault of its own: ${String(error)}`);
    this.session?.trip('host-fault', 'The rig host met a fault of its own; it is in the log.');
    this.ending ??= this.endInOrder('A fault of the rig host.', exitCodes.bug, restAfterFaultMs);
  }

  /** @returns what the command was to find out; undefined where it found nothing */
  private async take(command: HostCommand): Promise<unknown> {
    if (command.type === 'shut-down') return void this.shutDown('The server ends.');
    if (command.type === 'configure') return this.configure(command);
    const { session } = this;
    if (session === null) {
      throw new DomainError('host.unavailable', 'The rig host has not been configured yet.');
    }
    // Nothing changes by a test: no scan is hurried for it.
    if (command.type === 'probe') return session.prober.probe(command.channel);
    const answer = await obey(session, command);
    session.touch();
    return answer;
  }

  private async configure(command: Extract<HostCommand, { type: 'configure' }>): Promise<void> {
    if (this.ending !== null) throw new DomainError('host.unavailable', 'The rig host is ending.');
    if (this.session?.isFree === false) throw new DomainError('rig.busy');
    const next = new RigSession(command.rig, command, this.adapters, this.recorder, this.link, (error) =>
      this.onBug(error),
    );
    await this.session?.end();
    this.session = next;
    await next.begin();
  }

  private onServerGone(): void {
    this.session?.trip('server-silent', 'The link to the server closed.');
    this.ending ??= this.endInOrder('The link to the server closed.', exitCodes.inOrder, restBoundMs);
  }

  private onRecorderFailed(message: string): void {
    this.link.log('error', `The recorder failed: ${message}`);
    this.session?.trip('recorder', `The samples cannot be recorded: ${message}`);
  }

  private async endInOrder(reason: string, code: number, boundMs: number): Promise<void> {
    const { session } = this;
    let isAtRest = true;
    if (session !== null) {
      isAtRest = await this.comeToRest(session, reason, boundMs);
      await within(session.end(), closeBoundMs, undefined).catch(() => undefined);
    }
    await within(this.recorder.close(), closeBoundMs, undefined).catch(() => undefined);
    await within(this.link.drained(), drainBoundMs, undefined);
    this.exit(isAtRest || code !== exitCodes.inOrder ? code : exitCodes.notAtRest);
  }

  /** @returns false where the rig could not be brought to rest within the bound: its own watchdog acts */
  private async comeToRest(session: RigSession, reason: string, boundMs: number): Promise<boolean> {
    const untilMs = performance.now() + boundMs;
    let reachedMs = performance.now();
    try {
      while (!session.isAtRest()) {
        const nowMs = performance.now();
        if (!session.areAllConnectionsLost) reachedMs = nowMs;
        if (nowMs > untilMs || nowMs - reachedMs > lostBoundMs || session.hasLoopDied) return false;
        session.headForRest(reason);
        await delay(pollMs);
      }
      return true;
    } catch (error) {
      console.error(error);
      return false;
    }
  }
}

type SessionCommand = Exclude<HostCommand, { type: 'configure' | 'probe' | 'shut-down' }>;

/** @returns what the command tells beside that it was obeyed; undefined where it tells nothing */
async function obey(session: RigSession, command: SessionCommand): Promise<unknown> {
  const { engine } = session;
  switch (command.type) {
    case 'set-envelope':
      return session.setEnvelope(command.envelope);
    case 'set-lockout':
      return engine.setLockout(command.isLockedOut);
    case 'arm':
      return engine.arm(command.by);
    case 'disarm':
      return engine.disarm(command.by);
    case 'move':
      return engine.move(command.channel, command.value, command.by, command.hold);
    case 'release-move':
      return engine.releaseMove(command.channel, command.holdId);
    case 'start-run':
      return session.startRun(command.order);
    case 'pause':
      return engine.pause(command.by, command.reason);
    case 'resume':
      return engine.resume(command.by);
    case 'stop':
      return engine.stop(command.by, command.reason);
    case 'set-fault':
      return session.setFault(command.connection, command.fault, command.by);
    case 'emergency-stop':
      return engine.emergencyStop(command.by, command.reason, Date.now());
    case 'reset':
      return engine.reset(command.by, command.reason);
    case 'bypass-interlock':
      return engine.bypassInterlock(command);
    case 'end-bypass':
      return engine.endBypass(command.interlock, command.by);
    case 'acknowledge-interlock':
      return engine.acknowledgeInterlock(command.interlock, command.by);
    case 'force-interlock':
      return engine.forceInterlock(command);
  }
}
