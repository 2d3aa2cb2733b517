import { DomainError, type WireFault } from '@cresthold/shared';
import type {
  AdapterSession,
  AddressFacts,
  ProbeOutcome,
  ReadOutcome,
  ReadPlan,
  WriteOutcome,
} from '../contract.js';
import { damagedCatch, damagedWrite, faultOfCall, intactCount } from './damage.js';
import type { FaultControl } from './fault-control.js';
import { FaultyPlan } from './faulty-plan.js';

const ignore = (): void => undefined;

/** Passes calls on, or fails them as its control says; keeps the duties of the contract either way. */
export class FaultySession<Address> implements AdapterSession<Address> {
  /** Only where the inner session has one. */
  readonly probe?: (address: Address) => Promise<ProbeOutcome>;
  private readonly generation: number;
  private tail: Promise<unknown> = Promise.resolve();
  private ended: DomainError | null = null;
  private cancelWait: (() => void) | null = null;

  constructor(
    private readonly inner: AdapterSession<Address>,
    private readonly control: FaultControl,
  ) {
    this.generation = control.sessionGeneration;
    const probe = inner.probe?.bind(inner);
    if (probe) this.probe = (address) => this.probeThrough(probe, address);
  }

  describe(address: Address): AddressFacts {
    return this.inner.describe(address);
  }

  planRead(addresses: readonly Address[]): ReadPlan {
    return new FaultyPlan(this.inner.planRead(addresses), [...addresses]);
  }

  read(plan: ReadPlan): Promise<ReadOutcome> {
    if (!(plan instanceof FaultyPlan)) throw new TypeError('the plan is of another adapter');
    return this.inTurn(async () => {
      const fault = this.control.draw();
      const end = await this.suffer(fault, plan.count);
      if (end) return plan.fail(end, end);
      return plan.take(await this.inner.read(plan.inner), fault, this.control);
    });
  }

  write(addresses: readonly Address[], values: ArrayLike<number>): Promise<WriteOutcome> {
    const asked = new Float64Array(values);
    const asking = [...addresses];
    return this.inTurn(async () => {
      const fault = this.control.draw();
      const end = await this.suffer(fault, asking.length);
      if (end) return { faults: asking.map(() => end), lost: end };
      return fault ? this.writeDamaged(fault, asking, asked) : this.inner.write(asking, asked);
    });
  }

  async close(): Promise<void> {
    this.ended ??= new DomainError('adapter.cancelled', 'The connection was closed.');
    this.cancelWait?.();
    await this.inner.close();
  }

  private probeThrough(
    probe: (address: Address) => Promise<ProbeOutcome>,
    address: Address,
  ): Promise<ProbeOutcome> {
    return this.inTurn(async () => {
      const fault = this.control.draw();
      const end = await this.suffer(fault, 1);
      if (end) return { raw: '', value: NaN, trace: null, fault: end };
      const outcome = await probe(address);
      if (!fault || !this.control.concerns(address)) return outcome;
      const seen = damagedCatch(fault, outcome, null);
      return { ...seen, raw: faultOfCall(fault) ? '' : outcome.raw };
    });
  }

  /** Sends what still reaches the device, and puts the answers together again. */
  private async writeDamaged(
    fault: WireFault,
    addresses: readonly Address[],
    values: Float64Array,
  ): Promise<WriteOutcome> {
    const concerned = [...addresses.keys()].filter((index) => this.control.concerns(addresses[index]));
    const hit = new Set(concerned.slice(intactCount(fault, concerned.length)));
    const damaged = [...values].map((value, index) =>
      hit.has(index) ? damagedWrite(fault, value) : { sent: value },
    );
    const sentAt = [...damaged.keys()].filter((index) => damaged[index]?.sent !== null);
    const outcome = await this.inner.write(
      sentAt.flatMap((index) => addresses.slice(index, index + 1)),
      sentAt.map((index) => damaged[index]?.sent ?? NaN),
    );
    if (outcome.lost) return { faults: addresses.map(() => outcome.lost), lost: outcome.lost };
    const faults = damaged.map(({ answer }) => answer ?? null);
    sentAt.forEach((index, at) => {
      const own = outcome.faults[at] ?? null;
      // What the adapter refuses to send is told as it is, whatever the wire does.
      if (damaged[index]?.answer === undefined || own?.code === 'adapter.misconfigured') faults[index] = own;
    });
    return { faults, lost: null };
  }

  private inTurn<T>(task: () => Promise<T>): Promise<T> {
    const turn = this.tail.then(task);
    this.tail = turn.catch(ignore);
    return turn;
  }

  /** What befalls a call before it reaches the inner session. @returns why the session has ended, or null */
  private async suffer(fault: WireFault | null, values: number): Promise<DomainError | null> {
    const waitMs = fault ? this.waitMsOf(fault, values) : 0;
    if (!this.ended && waitMs > 0) await this.wait(waitMs);
    const isCut = fault?.kind === 'disconnect' || this.control.sessionGeneration !== this.generation;
    if (!this.ended && isCut) {
      this.ended = new DomainError('adapter.disconnected', 'Injected fault: the connection was cut.');
      // The device sees the loss as well: the inner wire is let go now, not when somebody closes the ruin.
      this.inner.close().catch(ignore);
    }
    return this.ended;
  }

  private waitMsOf(fault: WireFault, values: number): number {
    if (fault.kind === 'delay') return fault.delayMs;
    if (fault.kind === 'jitter') return fault.mostMs * this.control.uniform();
    if (fault.kind === 'slow-device') return fault.perValueMs * values;
    return fault.kind === 'drop' ? fault.timeoutMs : 0;
  }

  private wait(delayMs: number): Promise<void> {
    return new Promise((resolve) => {
      const finish = (): void => {
        cancel();
        this.cancelWait = null;
        resolve();
      };
      const cancel = this.control.timers.after(delayMs, finish);
      this.cancelWait = finish;
    });
  }
}
