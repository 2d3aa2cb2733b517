import { DomainError } from '@cresthold/shared';
import type { z } from 'zod';
import type {
  AdapterSession,
  AddressFacts,
  ProbeOutcome,
  ReadOutcome,
  ReadPlan,
  WriteOutcome,
} from '../contract.js';
import { parseOrMisconfigured } from '../parse-or-misconfigured.js';
import { factsOfCoding } from './codec.js';
import { isTrace, type ModbusAddress } from './modbus-address.schema.js';
import { ModbusAsker } from './modbus-asker.js';
import type { ModbusExchanger } from './modbus-link.js';
import { ModbusReadPlan } from './modbus-plan.js';
import type { ModbusRequest } from './modbus-request.js';
import { probeAddress } from './probe.js';
import { ReadRunner } from './read-runner.js';
import { type UnitTiming, UnitWatch } from './unit-watch.js';
import { isWritable, planWrites, protocolWriteLimits, readBackWriteLimits } from './write-planner.js';
import { type WritePlan, WriteRunner } from './write-runner.js';

export interface ModbusSessionOptions extends UnitTiming {
  /** What addresses of this adapter look like. */
  addressSchema: z.ZodType<ModbusAddress>;
  /** Longest time for one whole read or write from when its turn comes. */
  timeoutMs: number;
  gap: number;
  /** Whether writes of registers are read back in the same request. */
  readBack: boolean;
  /** A monotonic clock. */
  nowMs: () => number;
  /** Time that a request and its good answer take on the wire; nothing where left out. */
  wireMs?: (request: ModbusRequest) => number;
}

const ignore = (): void => undefined;
const noTime = (): number => 0;

/** The session of every MODBUS adapter, whatever its wire. Addresses are taken as immutable. */
export class ModbusSession implements AdapterSession<ModbusAddress> {
  private tail: Promise<unknown> = Promise.resolve();
  private readonly asker: ModbusAsker;
  private readonly parsed = new WeakMap<object, ModbusAddress>();
  private readonly writePlans = new WeakMap<readonly ModbusAddress[], WritePlan>();

  constructor(
    private readonly link: ModbusExchanger,
    private readonly options: ModbusSessionOptions,
  ) {
    const { nowMs, wireMs = noTime } = options;
    this.asker = new ModbusAsker(link, new UnitWatch(options), { nowMs, wireMs });
  }

  describe(address: ModbusAddress): AddressFacts {
    const parsed = this.parse(address, 'address');
    const facts = { isWritable: isWritable(parsed), ...factsOfCoding(parsed) };
    return isTrace(parsed) ? { ...facts, points: parsed.points } : facts;
  }

  planRead(addresses: readonly ModbusAddress[]): ReadPlan {
    const parsed = addresses.map((address, index) => this.parse(address, `addresses[${index}]`));
    return new ModbusReadPlan(parsed, this.options.gap);
  }

  read(plan: ReadPlan): Promise<ReadOutcome> {
    if (!(plan instanceof ModbusReadPlan)) throw new TypeError('the plan is of another adapter');
    return this.inTurn(async () => {
      const { timeoutMs, nowMs } = this.options;
      await new ReadRunner(this.asker, plan, timeoutMs, nowMs() + timeoutMs).run();
      return plan.outcome;
    });
  }

  async write(addresses: readonly ModbusAddress[], values: ArrayLike<number>): Promise<WriteOutcome> {
    const plan = this.writePlanOf(addresses);
    // What was asked for counts, whatever the caller does with its buffer before our turn comes.
    const asked = new Float64Array(values);
    return this.inTurn(() => new WriteRunner(this.asker, plan, asked, this.options).run());
  }

  async probe(address: ModbusAddress): Promise<ProbeOutcome> {
    const parsed = this.parse(address, 'address');
    return this.inTurn(() => probeAddress(this.asker, parsed, this.options.nowMs() + this.options.timeoutMs));
  }

  async close(): Promise<void> {
    await this.link.end(new DomainError('adapter.cancelled', 'The connection was closed.'));
  }

  private inTurn<T>(task: () => Promise<T>): Promise<T> {
    const turn = this.tail.then(task);
    this.tail = turn.catch(ignore);
    return turn;
  }

  private writePlanOf(addresses: readonly ModbusAddress[]): WritePlan {
    const known = this.writePlans.get(addresses);
    if (known && isSameList(known.source, addresses)) return known;
    const parsed = addresses.map((address, index) => this.parse(address, `addresses[${index}]`));
    const runs = planWrites(parsed, this.options.readBack ? readBackWriteLimits : protocolWriteLimits);
    const unitsFrom = runs.map(({ from }) => new Set(parsed.slice(from).map(({ unit }) => unit)).size);
    const plan = { source: [...addresses], addresses: parsed, runs, unitsFrom };
    this.writePlans.set(addresses, plan);
    return plan;
  }

  private parse(address: ModbusAddress, field: string): ModbusAddress {
    const known = this.parsed.get(address);
    if (known) return known;
    const parsed = parseOrMisconfigured(this.options.addressSchema, address, field);
    this.parsed.set(address, parsed);
    return parsed;
  }
}

/** A caller may fill the same array with other addresses: never trust the array's identity alone. */
function isSameList(known: readonly ModbusAddress[], given: readonly ModbusAddress[]): boolean {
  return known.length === given.length && known.every((address, index) => address === given[index]);
}
