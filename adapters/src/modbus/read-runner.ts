import { DomainError } from '@cresthold/shared';
import { isAboutContent } from './exception-codes.js';
import { isSilence, type ModbusAsker } from './modbus-asker.js';
import type { LinkOutcome } from './modbus-link.js';
import type { ModbusReadPlan } from './modbus-plan.js';
import { placeText, widthOf } from './modbus-address.schema.js';
import { ModbusRefusal } from './modbus-request.js';
import type { ReadBlock } from './read-planner.js';
import type { TraceRead } from './trace-read.js';

/** A device may change an array while it is read: how often it is tried to get a whole one. */
const mostTraceAttempts = 3;

/** One read of a plan, from its first request to its outcome. */
export class ReadRunner {
  /** Units that stayed silent in this read. */
  private readonly silentHere = new Set<number>();
  private isOver = false;

  constructor(
    private readonly asker: ModbusAsker,
    private readonly plan: ModbusReadPlan,
    private readonly timeoutMs: number,
    private readonly deadlineMs: number,
  ) {}

  async run(): Promise<void> {
    this.plan.outcome.lost = null;
    await this.readBlocks();
    for (const trace of this.plan.traces) await this.readTrace(trace);
    const { lost } = this.asker.link;
    if (lost) this.plan.lose(lost);
  }

  private async readBlocks(): Promise<void> {
    const { plan } = this;
    let position = 0;
    for (let left = plan.blocks.length; left > 0 && !this.asker.link.lost;) {
      const block = plan.blocks[position];
      if (!block) return;
      const answer = await this.answerTo(block);
      if (isSplittable(answer)) {
        const gained = plan.takeApart(position);
        left += gained;
        if (gained > 0) continue;
      }
      left -= 1;
      if (this.settle(block, answer)) position += 1;
      else plan.putLast(position);
    }
  }

  /** @returns false where the block is asked last from now on */
  private settle(block: ReadBlock, answer: LinkOutcome): boolean {
    if (Buffer.isBuffer(answer)) this.plan.accept(block, answer);
    else this.plan.reject(block, answer);
    return !isSilence(answer) || this.isOver;
  }

  private answerTo(block: ReadBlock): Promise<LinkOutcome> {
    return this.ask({ kind: 'read', ...block });
  }

  private async ask(request: Parameters<ModbusAsker['ask']>[0]): Promise<LinkOutcome> {
    const reason = this.isOver ? this.notAsked() : this.reasonToSkip(request.unit);
    if (reason) return reason;
    const answer = await this.asker.ask(request, this.deadlineMs);
    if (answer === null) {
      this.isOver = true;
      return this.notAsked();
    }
    if (isSilence(answer)) this.silentHere.add(request.unit);
    return answer;
  }

  private async readTrace(trace: TraceRead): Promise<void> {
    for (let attempt = 1; attempt <= mostTraceAttempts; attempt += 1) {
      const outcome = await this.readTraceOnce(trace);
      if (outcome === 'whole') {
        this.plan.acceptTrace(trace);
        return;
      }
      if (outcome !== 'torn') {
        this.plan.rejectTrace(trace, outcome);
        return;
      }
    }
    const { unit, table, address: start } = trace.address;
    const place = placeText(unit, table, start, widthOf(trace.address));
    const text = `${place}: the device changed the array each of the ${mostTraceAttempts} times that it was read.`;
    this.plan.rejectTrace(trace, new DomainError('adapter.corrupt', text));
  }

  private async readTraceOnce(trace: TraceRead): Promise<'whole' | 'torn' | DomainError> {
    trace.begin();
    const before = trace.stamp ? await this.ask(trace.stamp) : null;
    if (before instanceof DomainError) return before;
    for (const chunk of trace.chunks) {
      const answer = await this.ask(chunk);
      if (!Buffer.isBuffer(answer)) return answer;
      trace.accept(answer);
    }
    const after = trace.stamp ? await this.ask(trace.stamp) : null;
    if (after instanceof DomainError) return after;
    return before === null || after === null || before.equals(after) ? 'whole' : 'torn';
  }

  /** Why a silent unit is not asked now; the others come first. Null where it is. */
  private reasonToSkip(unit: number): DomainError | null {
    const { watch } = this.asker;
    const silences = watch.silences(unit);
    if (silences === 0) return null;
    const hasOthers = this.plan.units.some((other) => other !== unit && !watch.isSilent(other));
    if (this.silentHere.has(unit)) {
      return hasOthers || silences > 1 ? silent(unit, silences, 'not asked again in this read') : null;
    }
    if (!hasOthers) return null;
    const restMs = watch.restMs(unit, this.asker.nowMs());
    if (restMs > 0) return silent(unit, silences, `asked again in ${(restMs / 1000).toFixed(1)} s`);
    // One wait for silence per read is enough.
    return this.silentHere.size > 0 ? silent(unit, silences, 'asked again in one of the next reads') : null;
  }

  private notAsked(): DomainError {
    return new DomainError(
      'adapter.timeout',
      `Not asked: earlier requests used up the ${this.timeoutMs} ms of this call.`,
    );
  }
}

function silent(unit: number, silences: number, until: string): DomainError {
  const times = silences === 1 ? 'the last request' : `the last ${silences} requests`;
  return new DomainError('adapter.timeout', `Unit ${unit} did not answer ${times}: ${until}.`);
}

/** Asking a part of the request may succeed where the whole was refused. */
export function isSplittable(outcome: LinkOutcome): boolean {
  return outcome instanceof ModbusRefusal && isAboutContent(outcome.exceptionCode);
}
