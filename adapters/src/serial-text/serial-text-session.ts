import { DomainError } from '@cresthold/shared';
import type {
  AdapterSession,
  AddressFacts,
  ProbeOutcome,
  ReadOutcome,
  ReadPlan,
  WriteOutcome,
} from '../contract.js';
import { ErrorCheck } from './error-check.js';
import { probeAddress } from './probe-address.js';
import type { SerialTextAddress } from './serial-text-address.schema.js';
import type { SerialTextConfiguration } from './serial-text-configuration.js';
import { type QueryGroup, SerialTextReadPlan } from './serial-text-plan.js';
import { factsOf, parseTextAddress, placeOf, type TextAddress } from './text-address.js';
import type { TextLink, TextReply } from './text-link.js';
import { TextWriter } from './text-writer.js';

const ignore = (): void => undefined;

/** A session with one ASCII instrument. Addresses are taken as immutable. */
export class SerialTextSession implements AdapterSession<SerialTextAddress> {
  private tail: Promise<unknown> = Promise.resolve();
  private readonly parsed = new WeakMap<object, TextAddress>();
  private readonly errors: ErrorCheck;
  private readonly writer: TextWriter;

  constructor(
    private readonly link: TextLink,
    private readonly settings: SerialTextConfiguration,
    private readonly nowMs: () => number,
  ) {
    this.errors = new ErrorCheck(link, settings);
    this.writer = new TextWriter(link, settings.path, this.errors);
  }

  describe(address: SerialTextAddress): AddressFacts {
    return factsOf(this.parse(address, 'address'));
  }

  planRead(addresses: readonly SerialTextAddress[]): ReadPlan {
    const parsed = addresses.map((address, index) => this.parse(address, `addresses[${index}]`));
    this.watchStreams(parsed);
    return new SerialTextReadPlan(parsed, this.settings.path);
  }

  read(plan: ReadPlan): Promise<ReadOutcome> {
    if (!(plan instanceof SerialTextReadPlan)) throw new TypeError('the plan is of another adapter');
    return this.inTurn(() => this.readNow(plan));
  }

  async write(addresses: readonly SerialTextAddress[], values: ArrayLike<number>): Promise<WriteOutcome> {
    const parsed = addresses.map((address, index) => this.parse(address, `addresses[${index}]`));
    // What was asked for counts, whatever the caller does with its buffer before our turn comes.
    const asked = new Float64Array(values);
    return this.inTurn(() => this.writeNow(parsed, asked));
  }

  async probe(address: SerialTextAddress): Promise<ProbeOutcome> {
    const parsed = this.parse(address, 'address');
    this.watchStreams([parsed]);
    return this.inTurn(() => {
      const plan = new SerialTextReadPlan([parsed], this.settings.path);
      return probeAddress(this.link, plan, this.deadline(), () => this.readNow(plan));
    });
  }

  async close(): Promise<void> {
    await this.link.end(new DomainError('adapter.cancelled', 'The connection was closed.'));
  }

  private async readNow(plan: SerialTextReadPlan): Promise<ReadOutcome> {
    const deadlineMs = this.deadline();
    plan.outcome.lost = null;
    const missed: QueryGroup[] = [];
    for (const group of plan.groups) {
      const reply = await this.query(group, deadlineMs);
      if (this.link.lost) break;
      if (reply instanceof DomainError && reply.code === 'adapter.timeout') missed.push(group);
      plan.settle(group, reply);
    }
    for (const group of missed) plan.putLast(group);
    for (const member of plan.others) plan.settleMember(member, this.latestLine(member.address));
    if (!this.link.lost && this.errors.isDueAfterScan()) await this.checkAfterScan(plan, deadlineMs);
    if (this.link.lost) plan.lose(this.link.lost);
    return plan.outcome;
  }

  private async query(group: QueryGroup, deadlineMs: number): Promise<TextReply> {
    const { command, expectation } = group;
    if (this.link.lost) return this.link.lost;
    if (deadlineMs - this.nowMs() < 1) return this.notAsked();
    const reply = await this.link.exchange({ command, expectation }, deadlineMs);
    const isMissed = reply instanceof DomainError && reply.code === 'adapter.timeout';
    if (reply instanceof DomainError) this.errors.mayHoldOthers = true;
    if (!isMissed || !this.errors.isPossible || this.link.lost || deadlineMs - this.nowMs() < 1) return reply;
    // Devices with an error queue send no reply to a query that they do not know: the queue says why.
    const cause = await this.errors.run(`"${command}"`, deadlineMs);
    return cause?.code === 'adapter.refused' ? cause : reply;
  }

  /** An error that no write took blame for makes the readings of this scan doubtful. */
  private async checkAfterScan(plan: SerialTextReadPlan, deadlineMs: number): Promise<void> {
    const fault = await this.errors.run('check after this scan', deadlineMs);
    if (fault?.code !== 'adapter.refused') return;
    if (!this.writer.blame(fault)) plan.failAll(fault);
  }

  private async writeNow(addresses: readonly TextAddress[], values: Float64Array): Promise<WriteOutcome> {
    const deadlineMs = this.deadline();
    const faults: (DomainError | null)[] = [];
    for (const [index, address] of addresses.entries()) {
      const hasTime = this.link.lost !== null || deadlineMs - this.nowMs() >= 1;
      const fault = hasTime
        ? await this.writer.write(address, values[index] ?? NaN, deadlineMs)
        : this.notAsked();
      faults.push(fault);
    }
    return { faults, lost: addresses.length > 0 ? this.link.lost : null };
  }

  private latestLine(address: TextAddress): TextReply {
    const { stream, mostAgeMs } = address.given;
    const { path } = this.settings;
    if (stream === '') {
      return new DomainError(
        'adapter.misconfigured',
        `${path}, ${placeOf(address)}: this channel has no query.`,
      );
    }
    const latest = this.link.board.latest(stream);
    if (latest && this.nowMs() - latest.atMs <= mostAgeMs) return latest.text;
    const message = `${path}: no line "${stream}" has come within ${mostAgeMs} ms.`;
    return new DomainError('adapter.timeout', message);
  }

  private watchStreams(addresses: readonly TextAddress[]): void {
    for (const { given } of addresses) if (given.stream !== '') this.link.board.watch(given.stream);
  }

  private deadline(): number {
    return this.nowMs() + this.settings.timeoutMs;
  }

  private notAsked(): DomainError {
    const message = `Not asked: earlier commands used up the ${this.settings.timeoutMs} ms of this call.`;
    return new DomainError('adapter.timeout', message);
  }

  private inTurn<T>(task: () => Promise<T>): Promise<T> {
    const turn = this.tail.then(task);
    this.tail = turn.catch(ignore);
    return turn;
  }

  private parse(address: SerialTextAddress, field: string): TextAddress {
    const known = this.parsed.get(address);
    if (known) return known;
    const parsed = parseTextAddress(address, field);
    this.parsed.set(address, parsed);
    return parsed;
  }
}
