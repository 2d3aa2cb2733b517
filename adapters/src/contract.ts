import type { DomainError } from '@cresthold/shared';
import type { z } from 'zod';

/**
 * Version of this contract; a plug-in states the range that it was written for. 1.1 added traces, `probe` and
 * `estimate`, all optional: a plug-in for `^1.0.0` runs as it is.
 */
export const contractVersion = '1.1.0';

/** What an adapter is and what it must be told. */
export interface AdapterManifest<Configuration, Address> {
  /** E.g. `modbus-tcp`: a lower-case letter, then those, digits and hyphens, 40 at most; unique among adapters. */
  readonly id: string;
  /** For screens, 120 characters at most. */
  readonly title: string;
  /** Semver range of the contract, e.g. `^1.0.0`. */
  readonly contract: string;
  /**
   * What a connection must be told. Both schemas are strict objects of zod 4 that can be shown as JSON Schema, since
   * forms are drawn from them: `title` is a field's label, `description` its help.
   */
  readonly configurationSchema: z.ZodType<Configuration>;
  /** Which value of the device a channel is. */
  readonly addressSchema: z.ZodType<Address>;
}

/** Facts of one address that guard and screens need. */
export interface AddressFacts {
  isWritable: boolean;
  /** Step of the values that the wire can carry, engineering unit; 0 for floating point. */
  quantum: number;
  /** One value of that grid, engineering unit. */
  quantumOrigin: number;
  /** Least and greatest value that the wire can carry, engineering unit. */
  min: number;
  max: number;
  /**
   * Values per read: 1 where left out; more for a trace. Addresses that can read a trace say how many points
   * by a field `points` of their parsed form, so that they are checked against their channel before a rig is saved.
   */
  points?: number;
}

/** Reads joined into the fewest requests; made once, read each scan. */
export interface ReadPlan {
  /** Number of addresses. */
  readonly count: number;
  /** Number of requests that one read costs. */
  readonly requests: number;
}

/**
 * The outcome of one read, owned by the plan and overwritten by its next read. `faults[i]` is null
 * where `values[i]` is a fresh engineering value.
 */
export interface ReadOutcome {
  readonly values: Float64Array;
  readonly faults: (DomainError | null)[];
  /**
   * Arrays of the addresses that carry a trace, engineering values, null at all others; left out where no
   * address of the plan does. The `values` entry of a trace is NaN; where there is a fault, so is every point:
   * nothing of an earlier trace is left. Since 1.1.
   */
  readonly traces?: readonly (Float64Array | null)[];
  /** Set where the connection is gone and nothing was read: the session is of no more use. */
  lost: DomainError | null;
}

/** `faults[i]` is null where the device accepted the write; what is adapter.misconfigured was not sent. */
export interface WriteOutcome {
  readonly faults: (DomainError | null)[];
  lost: DomainError | null;
}

/** What one address answers when it is tried by hand. */
export interface ProbeOutcome {
  /**
   * What came over the wire, as a person would compare it with a manual, e.g. `holding-register 40: 0x01F4`; empty
   * where nothing came.
   */
  raw: string;
  /** Engineering value; NaN for a trace and where there is a fault. */
  value: number;
  trace: Float64Array | null;
  fault: DomainError | null;
}

/** What reading a list of addresses will cost, told without opening anything. */
export interface ScanBudget {
  /** As `ReadPlan.requests` of the same addresses; 0 for none. */
  requests: number;
  /** Time on the wire with a device that answers at once, s; null where the wire sets no bound. */
  wireS: number | null;
}

/**
 * One open connection. Duties:
 * - `read` and `write` settle within the configured timeout and never throw for what a device does:
 *   outcomes are values; a throw is a bug.
 * - one request is on the wire at a time; calls while another is under way wait in order.
 * - codes: `adapter.timeout`, `adapter.refused` (the device answered with an exception),
 *   `adapter.corrupt`, `adapter.disconnected`, `adapter.misconfigured`, `adapter.cancelled`.
 * - where there is a fault the value is NaN: no older value is ever shown as this one.
 * - one bad address spoils no other, in reads and in writes.
 * - arguments are read before the call returns; the caller uses its arrays again.
 * - after `lost` the session is dead: only `close` may follow.
 * - `close` may be called at any time and more than once; it resolves when socket or port is released,
 *   and calls under way end with `adapter.cancelled`.
 */
export interface AdapterSession<Address> {
  describe(address: Address): AddressFacts;
  /** @throws adapter.misconfigured naming the address at fault */
  planRead(addresses: readonly Address[]): ReadPlan;
  read(plan: ReadPlan): Promise<ReadOutcome>;
  /** Writes engineering values, joined where neighbours allow, in the given order. */
  write(addresses: readonly Address[], values: ArrayLike<number>): Promise<WriteOutcome>;
  /**
   * Tries one address by itself, with what came over the wire; waits its turn as a read does, and tells faults as
   * outcomes, `adapter.cancelled` and `adapter.disconnected` included. Since 1.1; without it a read is used.
   *
   * @throws adapter.misconfigured for an address that its schema does not take
   */
  probe?(address: Address): Promise<ProbeOutcome>;
  close(): Promise<void>;
}

export interface Adapter<Configuration = unknown, Address = unknown> {
  readonly manifest: AdapterManifest<Configuration, Address>;
  /**
   * Opens the wire. Rejects with a DomainError of the codes above within the configured timeout;
   * aborting the signal rejects with `adapter.cancelled` and leaves nothing open: no handle, timer or listener.
   * Once it has resolved, the signal says nothing more.
   */
  open(configuration: Configuration, signal: AbortSignal): Promise<AdapterSession<Address>>;
  /**
   * Cost of one read of all `addresses`, without opening anything; pure. Since 1.1.
   *
   * @throws adapter.misconfigured naming the address at fault
   */
  estimate?(configuration: Configuration, addresses: readonly Address[]): ScanBudget;
}
