import { closeSync } from 'node:fs';
import { constants, setPriority } from 'node:os';
import { fork, type ChildProcess } from 'node:child_process';
import { DomainError, type FromHost, type HostCommand, type ToHost } from '@cresthold/shared';
import { FloodGauge } from './flood-gauge.js';
import { checkHostMessage } from './host-message-check.js';
import { openOutput } from './host-output.js';
import { PendingRequests } from './pending-requests.js';
import type { SupervisionTiming } from './supervision-options.js';

/** How a life ended. Only `asked` was wanted. */
export type HostDeathKind = 'before-ready' | 'crashed' | 'hung' | 'flooded' | 'asked';

export interface HostDeath {
  kind: HostDeathKind;
  exitCode: number | null;
  signal: string | null;
  /** One sentence for log and people. */
  message: string;
}

export interface HostProgram {
  /** Path of the program that is forked. */
  file: string;
  args: string[];
  /** File for what it prints, null for none: a file outlives the server, a pipe would break with it. */
  outputFile: string | null;
}

export interface HostLifeListener {
  onMessage(message: FromHost): void;
  onFault(text: string): void;
}

/** Longest wait for the rest of a pipe whose process has gone. */
const drainMs = 500;

type Stage = 'starting' | 'ready' | 'dead';

/**
 * One forked process from fork to death. However it dies, `ended` settles once, after the process is
 * really gone, and every request that still waits is told.
 */
export class HostLife {
  /** Settles when the program is READY; rejects with host.unavailable when it never will be. */
  readonly ready: Promise<void>;
  readonly ended: Promise<HostDeath>;
  private readonly child: ChildProcess;
  private readonly requests = new PendingRequests();
  private readonly flood: FloodGauge;
  private readonly timers: NodeJS.Timeout[] = [];
  /** Configurations under way. */
  private configuring = 0;
  private stage: Stage = 'starting';
  private lastHeardMs = performance.now();
  /** Set where we know better than the exit code why it died. */
  private known: { kind: HostDeathKind; message: string } | null = null;
  private resolveReady!: () => void;
  private rejectReady!: (error: DomainError) => void;
  private resolveEnded!: (death: HostDeath) => void;

  constructor(
    program: HostProgram,
    private readonly timing: SupervisionTiming,
    private readonly listener: HostLifeListener,
  ) {
    this.flood = new FloodGauge(timing.messagesPerSMax);
    this.ready = new Promise((resolve, reject) => {
      this.resolveReady = resolve;
      this.rejectReady = reject;
    });
    this.ready.catch(() => undefined);
    this.ended = new Promise((resolve) => (this.resolveEnded = resolve));
    this.child = forkProgram(program);
    raisePriority(this.child.pid);
    this.listen();
  }

  get isDead(): boolean {
    return this.stage === 'dead';
  }

  get pid(): number | undefined {
    return this.child.pid;
  }

  /**
   * Sends a command and waits for its reply.
   *
   * @returns what the reply carries; undefined for most commands
   * @throws host.unavailable, host.timeout, or whatever the host answers
   */
  async request(command: HostCommand, timeoutMs = this.timing.requestMs): Promise<unknown> {
    if (this.stage !== 'ready') throw new DomainError('host.unavailable');
    const { requestId, reply } = this.requests.open(command.type, timeoutMs);
    this.send({ type: 'command', requestId, command });
    return reply;
  }

  /** As `request`, with a bound of its own: a host that opens its wires has no scan to tell of meanwhile. */
  async configure(command: Extract<HostCommand, { type: 'configure' }>): Promise<void> {
    this.configuring += 1;
    try {
      await this.request(command, this.timing.configureMs);
    } finally {
      this.configuring -= 1;
      this.lastHeardMs = performance.now();
    }
  }

  /** Asks the host to end in order, and ends it by force when it has not within the bound. */
  async shutDown(): Promise<HostDeath> {
    this.known ??= { kind: 'asked', message: 'The rig host ended as asked.' };
    if (this.stage === 'starting') this.child.kill('SIGKILL');
    if (this.stage === 'ready') {
      const overdue = setTimeout(() => {
        this.listener.onFault(`It did not end within ${this.timing.shutDownMs} ms of "shut-down": killed.`);
        this.child.kill('SIGKILL');
      }, this.timing.shutDownMs);
      this.timers.push(overdue);
      this.request({ type: 'shut-down' }, this.timing.shutDownMs).catch(() => undefined);
    }
    return this.ended;
  }

  private listen(): void {
    this.child.on('message', (value) => this.receive(value));
    this.child.on('exit', (code, signal) => this.drain(() => this.die(code, signal)));
    this.child.on('error', (error) => {
      // A failed fork never exits; a failed send or kill is followed by the exit of the process.
      if (this.child.pid === undefined) this.die(null, null, error.message);
    });
    const late = setTimeout(
      () => this.kill('before-ready', `It was not READY within ${this.timing.readyMs} ms.`),
      this.timing.readyMs,
    );
    this.timers.push(late);
    void this.ready.then(
      () => clearTimeout(late),
      () => undefined,
    );
  }

  /** What the process said last may still be in the pipe when it has gone. */
  private drain(then: () => void): void {
    if (!this.child.connected) return then();
    this.child.once('disconnect', then);
    this.timers.push(setTimeout(then, drainMs));
  }

  private receive(value: unknown): void {
    if (this.stage === 'dead' || this.known?.kind === 'flooded') return;
    if (this.flood.isTooMuch(performance.now())) {
      this.kill('flooded', `It sent more than ${this.timing.messagesPerSMax} messages a second.`);
      return;
    }
    const checked = checkHostMessage(value);
    if (!checked.isOk) {
      this.listener.onFault(`It sent a message that is none: ${checked.fault}`);
      return;
    }
    this.lastHeardMs = performance.now();
    const { message } = checked;
    if (message.type === 'ready') this.becomeReady();
    else if (message.type === 'reply') this.requests.settle(message.requestId, message.error, message.data);
    else this.listener.onMessage(message);
  }

  private becomeReady(): void {
    if (this.stage !== 'starting') return;
    this.stage = 'ready';
    this.timers.push(setInterval(() => this.send({ type: 'server-alive' }), this.timing.aliveEveryMs));
    this.timers.push(setInterval(() => this.watchSilence(), this.timing.silenceMs / 4));
    this.resolveReady();
  }

  /** A busy server reads late: what already waits in the pipe is read before the host is called silent. */
  private watchSilence(): void {
    const isSilent = () => performance.now() - this.lastHeardMs > this.timing.silenceMs;
    if (!isSilent() || this.configuring > 0 || this.known?.kind === 'asked') return;
    setTimeout(() => {
      if (this.stage === 'ready' && isSilent()) {
        this.kill('hung', `Nothing was heard of it for ${this.timing.silenceMs} ms.`);
      }
    }, 100);
  }

  private kill(kind: HostDeathKind, message: string): void {
    if (this.stage === 'dead') return;
    this.known ??= { kind, message };
    this.child.kill('SIGKILL');
  }

  private send(message: ToHost): void {
    if (!this.child.connected) return;
    // The error comes to the callback instead of being thrown; the exit of the process follows it.
    this.child.send(message, () => undefined);
  }

  /** The one path for every death. */
  private die(exitCode: number | null, signal: string | null, forkError?: string): void {
    if (this.stage === 'dead') return;
    const wasReady = this.stage === 'ready';
    this.stage = 'dead';
    for (const timer of this.timers) clearTimeout(timer);
    const kind = this.known?.kind ?? (wasReady ? 'crashed' : 'before-ready');
    const how = forkError ?? (signal ? `signal ${signal}` : `exit code ${exitCode}`);
    const message = this.known?.message ?? `The rig host ended unasked (${how}).`;
    this.requests.failAll(message);
    this.rejectReady(new DomainError('host.unavailable', message));
    this.resolveEnded({ kind, exitCode, signal, message });
  }
}

function forkProgram({ file, args, outputFile }: HostProgram): ChildProcess {
  const outputFd = outputFile === null ? null : openOutput(outputFile);
  try {
    const output = outputFd ?? 'ignore';
    return fork(file, args, {
      serialization: 'advanced',
      stdio: ['ignore', output, output, 'ipc'],
      execArgv: [],
    });
  } finally {
    // The child has a copy of its own.
    if (outputFd !== null) closeSync(outputFd);
  }
}

/** Where the system lets us: a rig must not wait for the server's or anybody else's work. */
function raisePriority(pid: number | undefined): void {
  try {
    if (pid !== undefined) setPriority(pid, constants.priority.PRIORITY_HIGH);
  } catch {
    // Only a privileged account may: the host then runs as everything else does.
  }
}
