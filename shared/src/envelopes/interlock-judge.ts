import type { CompiledExpression, ValueSource } from '../expressions/expression.types.js';
import type { InterlockBypass } from '../live/rig-status.schema.js';
import type { Interlock, InterlockAction } from './envelope.schema.js';
import { JudgedInterlock, type InterlockState } from './judged-interlock.js';

export type { InterlockState } from './judged-interlock.js';

/** The expressions of one interlock, made ready. */
export interface InterlockConditions {
  condition: CompiledExpression;
  /** Null where it may clear as soon as its condition is false. */
  clearCondition: CompiledExpression | null;
}

/** What people see of an interlock. */
export interface InterlockView {
  id: string;
  state: InterlockState;
  isBypassed: boolean;
  /** Who bypasses it, why and until when; null where nobody does. */
  bypass: InterlockBypass | null;
  /** A proof test takes its condition as true. */
  isForced: boolean;
}

/**
 * Judges the interlocks of an envelope once a scan. A condition whose input is bad, stale or not a
 * number evaluates to NaN and counts as violated. An interlock acts in the scan in which its
 * condition has held for `delayS`, once per episode; it is clear again when its condition is false and, where it
 * has acted, its `clearCondition` has held for `clearDelayS` and nobody has to acknowledge it.
 */
export class InterlockJudge {
  /** Interlocks that came due in the last scan, the first one first. Reused: copy to keep. */
  readonly acted: Interlock[] = [];
  /** Interlocks that had acted and became clear in the last scan. Reused: copy to keep. */
  readonly cleared: Interlock[] = [];
  /** Interlocks whose bypass ran out in the last scan. Reused: copy to keep. */
  readonly bypassEnded: Interlock[] = [];
  /** Whether any state is another than before the last scan. */
  hasChanged = false;
  /** Before the first judgement nothing is known to be clear. */
  hasJudged = false;
  private readonly judged: JudgedInterlock[];
  private nowS = NaN;

  /**
   * @param conditions one per interlock, in the same order
   * @param source what they read in each scan: the readings
   */
  constructor(
    interlocks: readonly Interlock[],
    conditions: readonly InterlockConditions[],
    source: ValueSource,
  ) {
    if (conditions.length !== interlocks.length) throw new Error('An interlock has no condition.');
    const truth = new Float64Array(1);
    this.judged = interlocks.flatMap((interlock, index) => {
      const compiled = conditions[index];
      if (!compiled) return [];
      const mayClear = compiled.clearCondition?.bind(source, truth) ?? null;
      return [new JudgedInterlock(interlock, compiled.condition.bind(source, truth), mayClear, truth)];
    });
  }

  /**
   * Judges what stands in the source now.
   *
   * @param tS monotonic time, s
   * @realtime safe: allocates only in a scan in which several interlocks act
   */
  judge(tS: number): void {
    this.acted.length = 0;
    this.cleared.length = 0;
    this.bypassEnded.length = 0;
    this.hasChanged = false;
    this.hasJudged = true;
    for (const judged of this.judged) {
      const before = judged.state;
      const wasBypassed = judged.isBypassedAt(this.nowS);
      const turn = judged.judge(tS);
      if (turn === 'acted') this.acted.push(judged.interlock);
      if (turn === 'cleared') this.cleared.push(judged.interlock);
      const hasBypassEnded = wasBypassed && !judged.isBypassedAt(tS);
      if (hasBypassEnded) this.bypassEnded.push(judged.interlock);
      if (judged.state !== before || hasBypassEnded) this.hasChanged = true;
    }
    this.nowS = tS;
    if (this.acted.length > 1) this.acted.sort((a, b) => this.dueS(a) - this.dueS(b));
  }

  stateOf(interlockId: string): InterlockState {
    return this.find(interlockId)?.state ?? 'clear';
  }

  /** The first interlock of an action, in the envelope's order, that has acted and is not clear yet. */
  firstActed(action: InterlockAction): Interlock | null {
    for (const { interlock, state } of this.judged) {
      if ((state === 'acted' || state === 'latched') && interlock.action === action) return interlock;
    }
    return null;
  }

  /** Calls back for each interlock that is not clear and not bypassed, in the envelope's order. */
  forEachViolated(visit: (interlock: Interlock, state: InterlockState) => void): void {
    for (const judged of this.judged) {
      const { interlock, state } = judged;
      if (state !== 'clear' && !judged.isBypassedAt(this.nowS)) visit(interlock, state);
    }
  }

  /** Calls back for each interlock that is bypassed, in the envelope's order. */
  forEachBypassed(visit: (judged: JudgedInterlock, bypass: InterlockBypass) => void): void {
    for (const judged of this.judged) {
      const bypass = judged.bypassAt(this.nowS);
      if (bypass) visit(judged, bypass);
    }
  }

  status(): InterlockView[] {
    return this.judged.map((judged) => ({
      id: judged.interlock.id,
      state: judged.state,
      isBypassed: judged.isBypassedAt(this.nowS),
      bypass: judged.bypassAt(this.nowS),
      isForced: judged.isForcedAt(this.nowS),
    }));
  }

  /** @returns the interlock, or null where the envelope has none of this id */
  find(interlockId: string): JudgedInterlock | null {
    return this.judged.find(({ interlock }) => interlock.id === interlockId) ?? null;
  }

  /** When the interlock came due; in one scan this decides which was first out. */
  private dueS(interlock: Interlock): number {
    return this.find(interlock.id)?.dueS ?? NaN;
  }
}
