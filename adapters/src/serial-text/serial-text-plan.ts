import { DomainError } from '@cresthold/shared';
import type { ReadOutcome, ReadPlan } from '../contract.js';
import { showText } from './escaped-text.js';
import type { Expectation } from './frame-reader.js';
import { listOfReply, type ReplyFault, samplesOfBlock, valueOfReply } from './reply-value.js';
import { placeOf, type TextAddress } from './text-address.js';
import type { TextReply } from './text-link.js';

interface Member {
  readonly index: number;
  readonly address: TextAddress;
}

/** One query and all addresses that take their values from its reply. */
export interface QueryGroup {
  readonly command: string;
  readonly expectation: Expectation;
  readonly members: Member[];
}

/** Addresses by the query that they share. */
export function groupByQuery(addresses: readonly TextAddress[]): QueryGroup[] {
  const groups = new Map<string, QueryGroup>();
  addresses.forEach((address, index) => {
    const { query, expectation } = address;
    if (query === null) return;
    const key = JSON.stringify([query, expectation]);
    const group = groups.get(key) ?? { command: query, expectation, members: [] };
    group.members.push({ index, address });
    groups.set(key, group);
  });
  return [...groups.values()];
}

/** A plan with the buffers of its outcome. Queries that were missed are asked last from then on. */
export class SerialTextReadPlan implements ReadPlan {
  readonly outcome: ReadOutcome;
  /** In the order in which they are asked. */
  readonly groups: QueryGroup[];
  /** Addresses without a query. */
  readonly others: readonly Member[];

  constructor(
    readonly addresses: readonly TextAddress[],
    private readonly port: string,
  ) {
    this.groups = groupByQuery(addresses);
    this.others = addresses.flatMap((address, index) => (address.query === null ? [{ index, address }] : []));
    this.outcome = emptyOutcome(addresses);
  }

  get count(): number {
    return this.addresses.length;
  }

  get requests(): number {
    return this.groups.length;
  }

  /** Takes what one query brought. */
  settle(group: QueryGroup, reply: TextReply): void {
    for (const member of group.members) this.settleMember(member, reply);
  }

  /** Takes what came for one address; values are NaN where there is a fault, never an older reading. */
  settleMember({ index, address }: Member, reply: TextReply): void {
    const { values, faults, traces } = this.outcome;
    const trace = traces?.[index] ?? null;
    const value = reply instanceof DomainError ? reply : valueOf(reply, address, trace);
    values[index] = typeof value === 'number' ? value : NaN;
    faults[index] = typeof value === 'number' ? null : this.faultOf(address, reply, value);
    if (faults[index]) trace?.fill(NaN);
  }

  /** Marks everything as not read. */
  lose(error: DomainError): void {
    this.failAll(error);
    this.outcome.lost = error;
  }

  failAll(error: DomainError): void {
    for (const [index, address] of this.addresses.entries()) this.settleMember({ index, address }, error);
  }

  /** Asks this query last from now on, so that a silent one does not eat the time of the others. */
  putLast(group: QueryGroup): void {
    this.groups.push(...this.groups.splice(this.groups.indexOf(group), 1));
  }

  private faultOf(address: TextAddress, reply: TextReply, fault: DomainError | ReplyFault): DomainError {
    if (fault instanceof DomainError) return fault;
    const shown = typeof reply === 'string' ? ` "${showText(reply)}"` : '';
    const message = `${this.port}, ${placeOf(address)}: no valid reply${shown}: ${fault.fault}.`;
    return new DomainError('adapter.corrupt', message);
  }
}

function emptyOutcome(addresses: readonly TextAddress[]): ReadOutcome {
  const traces = addresses.map(({ given }) =>
    given.shape === 'value' ? null : new Float64Array(given.points).fill(NaN),
  );
  return {
    values: new Float64Array(addresses.length).fill(NaN),
    faults: new Array<DomainError | null>(addresses.length).fill(null),
    ...(traces.some((trace) => trace !== null) ? { traces } : {}),
    lost: null,
  };
}

/** The value of a reply; NaN for a trace, whose points go into `trace`. */
export function valueOf(
  reply: string | Buffer,
  { given }: TextAddress,
  trace: Float64Array | null,
): number | ReplyFault {
  if (given.shape === 'value' || !trace) {
    return typeof reply === 'string'
      ? valueOfReply(reply, given)
      : { fault: 'a block came in place of a line' };
  }
  const fault =
    typeof reply === 'string' ? listOfReply(reply, given, trace) : samplesOfBlock(reply, given, trace);
  return fault ?? NaN;
}
