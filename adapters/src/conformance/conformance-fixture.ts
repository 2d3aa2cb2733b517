import type { Adapter } from '../contract.js';

/** A value of the peer that can be read and written through the adapter. */
export interface ConformanceCell<Address> {
  readonly address: Address;
  /** Two different engineering values that the wire carries exactly. */
  readonly values: readonly [number, number];
}

/** An array of the peer that can be read through the adapter. */
export interface ConformanceTrace<Address> {
  readonly address: Address;
  /** What the device holds, engineering values that the wire carries exactly; at least two. */
  readonly points: readonly number[];
}

/** What the peer of a fixture can be made to do; the kit checks the duties that go with it. */
export type Provocation =
  /** It has an address that it refuses: `peer.refused`. */
  | 'refuse'
  /** It has an address that can only be read: `peer.readOnly`. */
  | 'read-only'
  /** `peer.silence()` and `peer.recover()`. */
  | 'silence'
  /** `peer.garble()` and `peer.recover()`. */
  | 'garble'
  /** `peer.cut()`; it takes new connections afterwards. */
  | 'cut'
  /** It knows a configuration that nobody answers at: `peer.unreachable`. */
  | 'unreachable'
  /** It has arrays that can be read: `peer.traces`. */
  | 'trace';

/** The device end of one test, started afresh for each. */
export interface ConformancePeer<Configuration, Address> {
  /** With a short timeout, yet long enough for a busy machine: each check of silence waits for it twice. */
  readonly configuration: Configuration;
  /** At least three. */
  readonly cells: readonly ConformanceCell<Address>[];
  /** What the device itself holds at a cell, engineering value, seen past the adapter. */
  peek(address: Address): number;
  /** Needed where the fixture declares `trace`. */
  readonly traces?: readonly ConformanceTrace<Address>[];
  readonly refused?: Address;
  readonly readOnly?: Address;
  readonly unreachable?: Configuration;
  silence?(): void;
  garble?(): void;
  recover?(): void;
  cut?(): void;
  stop(): Promise<void>;
}

/**
 * What the kit must know of a plug-in: a device end that it may provoke, and what no schema of it takes. A peer that
 * shares no code with the adapter proves most: a fault that both have alike is not found.
 */
export interface ConformanceFixture<Configuration, Address> {
  readonly title: string;
  readonly adapter: Adapter<Configuration, Address>;
  /** Longest time that a read or write of `configuration` may take, ms. */
  readonly timeoutMs: number;
  readonly provokes: readonly Provocation[];
  readonly malformedConfiguration: unknown;
  readonly malformedAddress: unknown;
  start(): Promise<ConformancePeer<Configuration, Address>>;
}

export interface ConformanceOptions {
  /** Number of times that the check for leaks opens and closes, 50 where left out; use 1000 in a long suite. */
  cycles?: number;
}

/** The two functions that every test runner has; the kit brings its own assertions. */
export interface TestRunner {
  describe(title: string, body: () => void): void;
  it(title: string, body: () => Promise<void>): void;
}
