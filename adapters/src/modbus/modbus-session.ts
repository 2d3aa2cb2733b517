import { DomainError } from '@cresthold/shared';
import type { AdapterSession, AddressFacts, ReadOutcome, ReadPlan, WriteOutcome } from '../contract.js';
import { parseOrMisconfigured } from '../parse-or-misconfigured.js';
import { encodeRaw, factsOfCoding, wordsOfRaw } from './codec.js';
import { isAboutContent } from './exception-codes.js';
import { type ModbusAddress, modbusAddressSchema, placeText } from './modbus-address.schema.js';
import type { ModbusLink } from './modbus-link.js';
import { ModbusReadPlan } from './modbus-plan.js';
import { ModbusRefusal, type ModbusRequest } from './modbus-request.js';
import { isWritableTable, planWrites, type WriteRun } from './write-planner.js';

export interface ModbusSessionOptions {
  /** Longest time for one whole read or write from when its turn comes. */
  timeoutMs: number;
  gap: number;
  /** A monotonic clock. */
  nowMs: () => number;
}

/** A prepared write: what each entry sends, and which entries go together. */
interface WritePlan {
  /** The caller's own objects, to see whether the list is still the one that was prepared. */
  readonly source: readonly ModbusAddress[];
  readonly addresses: readonly ModbusAddress[];
  readonly runs: readonly WriteRun[];
  /** Number of different units in this run and those after it. */
  readonly unitsFrom: readonly number[];
}

const ignore = (): void => undefined;

/** The session of every MODBUS adapter, whatever its wire. Addresses are taken as immutable. */
export class ModbusSession implements AdapterSession<ModbusAddress> {
  private tail: Promise<unknown> = Promise.resolve();
  private readonly parsed = new WeakMap<object, ModbusAddress>();
  private readonly writePlans = new WeakMap<readonly ModbusAddress[], WritePlan>();

  constructor(
    private readonly link: ModbusLink,
    private readonly options: ModbusSessionOptions,
  ) {}

  describe(address: ModbusAddress): AddressFacts {
    const parsed = this.parse(address, 'address');
    return { isWritable: isWritableTable(parsed.table), ...factsOfCoding(parsed) };
  }

  planRead(addresses: readonly ModbusAddress[]): ReadPlan {
    const parsed = addresses.map((address, index) => this.parse(address, `addresses[${index}]`));
    return new ModbusReadPlan(parsed, this.options.gap);
  }

  read(plan: ReadPlan): Promise<ReadOutcome> {
    if (!(plan instanceof ModbusReadPlan)) throw new TypeError('the plan is of another adapter');
    return this.inTurn(() => this.readNow(plan));
  }

  async write(addresses: readonly ModbusAddress[], values: ArrayLike<number>): Promise<WriteOutcome> {
    const plan = this.writePlanOf(addresses);
    // What was asked for counts, whatever the caller does with its buffer before our turn comes.
    const asked = new Float64Array(values);
    return this.inTurn(() => this.writeNow(plan, asked));
  }

  async close(): Promise<void> {
    await this.link.end(new DomainError('adapter.cancelled', 'The connection was closed.'));
  }

  private inTurn<T>(task: () => Promise<T>): Promise<T> {
    const turn = this.tail.then(task);
    this.tail = turn.catch(ignore);
    return turn;
  }

  private async readNow(plan: ModbusReadPlan): Promise<ReadOutcome> {
    const deadlineMs = this.options.nowMs() + this.options.timeoutMs;
    plan.outcome.lost = null;
    let position = 0;
    let left = plan.blocks.length;
    while (left > 0) {
      const block = plan.blocks[position];
      if (!block) break;
      const answer = await this.exchange({ kind: 'read', ...block }, deadlineMs);
      if (this.link.lost) {
        plan.lose(this.link.lost);
        break;
      }
      if (answer === null) {
        plan.rejectRest(position, left, this.notAsked());
        break;
      }
      if (!Buffer.isBuffer(answer) && isSplittable(answer)) {
        const parts = plan.takeApart(position);
        left += parts;
        if (parts > 0) continue;
      }
      left -= 1;
      if (plan.settle(block, answer)) position += 1;
      else plan.putLast(position);
    }
    return plan.outcome;
  }

  private async writeNow(plan: WritePlan, values: ArrayLike<number>): Promise<WriteOutcome> {
    const deadlineMs = this.options.nowMs() + this.options.timeoutMs;
    const outcome: WriteOutcome = { faults: new Array<null>(plan.addresses.length).fill(null), lost: null };
    for (const [index, run] of plan.runs.entries()) {
      // Each unit gets its share of the time left, so that a silent one cannot keep the others from theirs.
      const nowMs = this.options.nowMs();
      const runDeadlineMs = nowMs + (deadlineMs - nowMs) / (plan.unitsFrom[index] ?? 1);
      await this.writeRun(plan.addresses, values, run, runDeadlineMs, outcome);
    }
    return outcome;
  }

  private async writeRun(
    addresses: readonly ModbusAddress[],
    values: ArrayLike<number>,
    run: WriteRun,
    deadlineMs: number,
    outcome: WriteOutcome,
  ): Promise<void> {
    const request = requestOf(addresses, values, run);
    const answer =
      request instanceof DomainError
        ? request
        : ((await this.exchange(request, deadlineMs)) ?? this.notAsked());
    if (this.link.lost) outcome.lost = this.link.lost;
    if (Buffer.isBuffer(answer)) return;
    const isSingle = run.to - run.from === 1;
    const mayHelpSingly = request instanceof DomainError || isSplittable(answer);
    if (isSingle || !mayHelpSingly || outcome.lost) {
      outcome.faults.fill(answer, run.from, run.to);
      return;
    }
    for (let index = run.from; index < run.to; index += 1) {
      await this.writeRun(addresses, values, { from: index, to: index + 1 }, deadlineMs, outcome);
    }
  }

  /** Null where no time is left to ask. */
  private exchange(request: ModbusRequest, deadlineMs: number): Promise<Buffer | DomainError | null> {
    const leftMs = deadlineMs - this.options.nowMs();
    if (this.link.lost) return Promise.resolve(this.link.lost);
    return leftMs < 1 ? Promise.resolve(null) : this.link.exchange(request, Math.ceil(leftMs));
  }

  private notAsked(): DomainError {
    return new DomainError(
      'adapter.timeout',
      `Not asked: earlier requests used up the ${this.options.timeoutMs} ms of this call.`,
    );
  }

  private writePlanOf(addresses: readonly ModbusAddress[]): WritePlan {
    const known = this.writePlans.get(addresses);
    if (known && isSameList(known.source, addresses)) return known;
    const parsed = addresses.map((address, index) => this.parse(address, `addresses[${index}]`));
    const runs = planWrites(parsed);
    const unitsFrom = runs.map(({ from }) => new Set(parsed.slice(from).map(({ unit }) => unit)).size);
    const plan = { source: [...addresses], addresses: parsed, runs, unitsFrom };
    this.writePlans.set(addresses, plan);
    return plan;
  }

  private parse(address: ModbusAddress, field: string): ModbusAddress {
    const known = this.parsed.get(address);
    if (known) return known;
    const parsed = parseOrMisconfigured(modbusAddressSchema, address, field);
    this.parsed.set(address, parsed);
    return parsed;
  }
}

/** A caller may fill the same array with other addresses: never trust the array's identity alone. */
function isSameList(known: readonly ModbusAddress[], given: readonly ModbusAddress[]): boolean {
  return known.length === given.length && known.every((address, index) => address === given[index]);
}

function isSplittable(fault: DomainError): boolean {
  return fault instanceof ModbusRefusal && isAboutContent(fault.exceptionCode);
}

/** The request of one run, or the first reason why it cannot be made. */
function requestOf(
  addresses: readonly ModbusAddress[],
  values: ArrayLike<number>,
  run: WriteRun,
): ModbusRequest | DomainError {
  const first = addresses[run.from];
  if (!first) throw new RangeError('an empty run of writes');
  const words: number[] = [];
  for (let index = run.from; index < run.to; index += 1) {
    const address = addresses[index] ?? first;
    const place = placeText(address.unit, address.table, address.address, 1);
    if (!isWritableTable(address.table)) {
      return new DomainError('adapter.misconfigured', `${place}: this table can only be read.`);
    }
    const raw = encodeRaw(values[index] ?? NaN, address);
    if (typeof raw !== 'number') return new DomainError('adapter.misconfigured', `${place}: ${raw.fault}`);
    words.push(...wordsOfRaw(raw, address));
  }
  const { unit, address } = first;
  return first.table === 'coil'
    ? { kind: 'write-coil', unit, address, isOn: words[0] === 1 }
    : { kind: 'write-registers', unit, address, words };
}
