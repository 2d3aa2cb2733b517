import {
  createSeededUniform,
  nextUniform,
  type SeededUniform,
  type WireFault,
  type WireFaultInput,
  wireFaultSchema,
} from '@cresthold/shared';
import { systemTimers, type TimerPort } from '../timer-port.js';

export interface FaultControlOptions {
  /** A clock that never goes back, ms; the process's own where left out. */
  nowMs?: () => number;
  timers?: TimerPort;
}

/**
 * Sets, at any time, how the sessions opened through `withFaults` misbehave.
 *
 * @example
 * control.fault = { kind: 'corrupt', probability: 0.1, seed: 7 }; // one call in ten
 * control.fault = { kind: 'none' };
 */
export class FaultControl {
  readonly timers: TimerPort;
  private readonly nowMs: () => number;
  private current: WireFault | null = null;
  /** Addresses that are hit, as text; null for all. */
  private targets: ReadonlySet<string> | null = null;
  private random: SeededUniform = createSeededUniform(1);
  private setAtMs = 0;
  private generation = 0;
  private changes = 0;

  constructor(options: FaultControlOptions = {}) {
    this.nowMs = options.nowMs ?? (() => performance.now());
    this.timers = options.timers ?? systemTimers;
  }

  get fault(): WireFault | null {
    return this.current;
  }

  /** Hits every address; see `put` for a choice. @throws ZodError for a fault that is none */
  set fault(fault: WireFaultInput | { kind: 'none' } | null) {
    if (fault === null || fault.kind === 'none') this.clear();
    else this.put(fault);
  }

  /**
   * @param addresses those that are hit; all where left out. `channels` of the fault is for whoever knows channels
   * @throws ZodError for a fault that is none
   */
  put(fault: WireFaultInput, addresses: readonly unknown[] | null = null): void {
    this.current = wireFaultSchema.parse(fault);
    this.targets = addresses && new Set(addresses.map((address) => JSON.stringify(address)));
    this.random = createSeededUniform(this.current.seed);
    this.setAtMs = this.nowMs();
    this.changes += 1;
  }

  clear(): void {
    this.current = null;
    this.changes += 1;
  }

  /** Ends the open sessions as a broken wire would; new ones are welcome. */
  disconnect(): void {
    this.generation += 1;
  }

  /** What a session remembers to see that it was ended. */
  get sessionGeneration(): number {
    return this.generation;
  }

  /** Goes up with every fault that is put or cleared. */
  get revision(): number {
    return this.changes;
  }

  /** Whether the fault is between its beginning and its end. */
  get isActive(): boolean {
    if (this.current === null) return false;
    const sinceS = (this.nowMs() - this.setAtMs) / 1000;
    return sinceS >= this.current.fromS && sinceS < (this.current.untilS ?? Infinity);
  }

  /** The fault that befalls the call that begins now; null where it gets through. */
  draw(): WireFault | null {
    if (!this.isActive || this.current === null) return null;
    return this.uniform() < this.current.probability ? this.current : null;
  }

  /** The next number of the fault's seed, even in [0, 1). */
  uniform(): number {
    return nextUniform(this.random);
  }

  concerns(address: unknown): boolean {
    return this.targets?.has(JSON.stringify(address)) ?? true;
  }
}
