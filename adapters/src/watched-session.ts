import type { DomainError } from '@cresthold/shared';
import type {
  AdapterSession,
  AddressFacts,
  ProbeOutcome,
  ReadOutcome,
  ReadPlan,
  WriteOutcome,
} from './contract.js';

export interface SessionWatcher {
  /** At the first outcome that is not a loss and holds an answer of the device. */
  onAnswered(): void;
  /** At the first outcome that says that the session is lost. */
  onLost(error: DomainError): void;
}

/** Passes everything on, traces and probes as well, and tells of the first answer and of the loss. */
export class WatchedSession<Address> implements AdapterSession<Address> {
  /** Only where the inner session has one; what it brings is passed on and not watched. */
  readonly probe?: (address: Address) => Promise<ProbeOutcome>;
  private hasAnswered = false;
  private isLost = false;

  constructor(
    private readonly inner: AdapterSession<Address>,
    private readonly watcher: SessionWatcher,
  ) {
    const probe = inner.probe?.bind(inner);
    if (probe) this.probe = probe;
  }

  describe(address: Address): AddressFacts {
    return this.inner.describe(address);
  }

  planRead(addresses: readonly Address[]): ReadPlan {
    return this.inner.planRead(addresses);
  }

  async read(plan: ReadPlan): Promise<ReadOutcome> {
    const outcome = await this.inner.read(plan);
    this.watch(outcome);
    return outcome;
  }

  async write(addresses: readonly Address[], values: ArrayLike<number>): Promise<WriteOutcome> {
    const outcome = await this.inner.write(addresses, values);
    this.watch(outcome);
    return outcome;
  }

  close(): Promise<void> {
    return this.inner.close();
  }

  private watch(outcome: ReadOutcome | WriteOutcome): void {
    if (outcome.lost) {
      if (!this.isLost) this.watcher.onLost(outcome.lost);
      this.isLost = true;
    } else if (!this.hasAnswered && outcome.faults.includes(null)) {
      this.hasAnswered = true;
      this.watcher.onAnswered();
    }
  }
}
