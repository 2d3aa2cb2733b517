import assert from 'node:assert/strict';
import type { DomainError, ErrorCode } from '@cresthold/shared';
import type { AdapterSession } from '../contract.js';
import { asDomainError } from '../known-error.js';
import type { ConformanceCell, ConformanceFixture, ConformancePeer } from './conformance-fixture.js';

/** What one check works with. */
export interface Setting<Configuration, Address> {
  readonly fixture: ConformanceFixture<Configuration, Address>;
  readonly peer: ConformancePeer<Configuration, Address>;
  readonly session: AdapterSession<Address>;
  readonly cells: readonly ConformanceCell<Address>[];
}

export type Check = <C, A>(setting: Setting<C, A>) => Promise<void>;

/** Runs a check on a fresh peer and session and releases both, whatever happens. */
export async function withSetting<C, A>(
  fixture: ConformanceFixture<C, A>,
  check: (setting: Setting<C, A>) => Promise<void>,
): Promise<void> {
  const peer = await fixture.start();
  try {
    const session = await fixture.adapter.open(peer.configuration, new AbortController().signal);
    try {
      assert.ok(peer.cells.length >= 3, 'the fixture needs three cells');
      await check({ fixture, peer, session, cells: peer.cells });
    } finally {
      await session.close();
    }
  } finally {
    await peer.stop();
  }
}

/** The error's code, or what else was thrown. */
export async function codeOfRejection(promise: Promise<unknown>): Promise<string> {
  try {
    await promise;
    return 'no error';
  } catch (error) {
    return asDomainError(error)?.code ?? `no error of the contract: ${String(error)}`;
  }
}

/** Every code that the contract knows. */
const contractCodes: readonly string[] = [
  'adapter.timeout',
  'adapter.refused',
  'adapter.corrupt',
  'adapter.disconnected',
  'adapter.misconfigured',
  'adapter.cancelled',
];

/** The codes of an outcome; fails where a fault is none of the contract or says nothing. */
export function codesOf(faults: readonly (DomainError | null)[]): (ErrorCode | null)[] {
  return faults.map((fault) => {
    if (fault === null) return null;
    assert.ok(contractCodes.includes(fault.code), `"${fault.code}" is no code of the contract`);
    assert.notEqual(fault.message.trim(), '', `a fault with code "${fault.code}" says nothing`);
    return fault.code;
  });
}

/** Fails where a promise takes longer than the adapter may; two seconds are granted to a busy machine. */
export async function within<T>(timeoutMs: number, what: string, promise: Promise<T>): Promise<T> {
  let timer: NodeJS.Timeout | undefined;
  const tooLate = new Promise<never>((_, reject) => {
    timer = setTimeout(() => {
      reject(new Error(`${what} did not settle within ${timeoutMs} ms and 2 s of grace`));
    }, timeoutMs + 2000);
  });
  try {
    return await Promise.race([promise, tooLate]);
  } finally {
    clearTimeout(timer);
  }
}

export function addressesOf<A>(cells: readonly ConformanceCell<A>[]): A[] {
  return cells.map((cell) => cell.address);
}

export function valuesOf<A>(cells: readonly ConformanceCell<A>[], which: 0 | 1): number[] {
  return cells.map((cell) => cell.values[which]);
}

/** Writes one of the two values of each cell and expects the device to take them. */
export async function writeAll<C, A>({ session, cells }: Setting<C, A>, which: 0 | 1): Promise<void> {
  const outcome = await session.write(addressesOf(cells), valuesOf(cells, which));
  assert.equal(outcome.lost, null);
  assert.deepEqual(
    codesOf(outcome.faults),
    cells.map(() => null),
  );
}

/** Reads every cell and expects one of its two values. */
export async function readAll<C, A>(setting: Setting<C, A>, which: 0 | 1): Promise<void> {
  const { session, cells } = setting;
  const outcome = await session.read(session.planRead(addressesOf(cells)));
  assert.deepEqual([...outcome.values], valuesOf(cells, which));
}

/** The good cells with one more address in the middle. */
export function withOneMore<C, A>({ cells }: Setting<C, A>, address: A): A[] {
  const addresses = addressesOf(cells);
  addresses.splice(1, 0, address);
  return addresses;
}

/** What a fixture declares it can do it must bring. */
export function brought<T>(value: T | undefined, name: string): T {
  if (value === undefined) throw new Error(`the fixture declares a provocation but brings no "${name}"`);
  return value;
}
