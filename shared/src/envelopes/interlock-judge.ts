import type { CompiledExpression, ValueSource } from '../expressions/expression.types.js';
import type { Interlock, InterlockAction } from './envelope.schema.js';

export type InterlockState = 'clear' | 'pending' | 'acted';

/** Two times closer than this are the same, s: sums of periods are not exact. */
const sameTimeS = 1e-9;

interface Judged {
  readonly interlock: Interlock;
  /** Puts whether the condition holds into the judge's `truth`. */
  readonly evaluate: () => void;
  state: InterlockState;
  /** When the condition became true, s; NaN while it is false. */
  sinceS: number;
}

/**
 * Judges the interlocks of an envelope once a scan. A condition whose input is bad, stale or not a
 * number evaluates to NaN and counts as violated. An interlock acts in the scan in which its
 * condition has held for `delayS`, once per episode, and is clear as soon as the condition is false.
 */
export class InterlockJudge {
  /** Interlocks that came due in the last scan, the first one first. Reused: copy to keep. */
  readonly acted: Interlock[] = [];
  /** Interlocks that had acted and became clear in the last scan. Reused: copy to keep. */
  readonly cleared: Interlock[] = [];
  /** Whether any state is another than before the last scan. */
  hasChanged = false;
  /** Before the first judgement nothing is known to be clear. */
  hasJudged = false;
  private readonly judged: Judged[];
  private readonly truth = new Float64Array(1);

  /**
   * @param conditions one per interlock, in the same order
   * @param source what they read in each scan: the readings
   */
  constructor(
    interlocks: readonly Interlock[],
    conditions: readonly CompiledExpression[],
    source: ValueSource,
  ) {
    this.judged = interlocks.flatMap((interlock, index) => {
      const evaluate = conditions[index]?.bind(source, this.truth);
      return evaluate ? [{ interlock, evaluate, state: 'clear' as const, sinceS: NaN }] : [];
    });
    if (this.judged.length !== interlocks.length) throw new Error('An interlock has no condition.');
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
    this.hasChanged = false;
    this.hasJudged = true;
    for (const judged of this.judged) {
      const before = judged.state;
      this.judgeOne(judged, tS);
      if (judged.state !== before) this.hasChanged = true;
    }
    if (this.acted.length > 1) this.acted.sort((a, b) => this.dueS(a) - this.dueS(b));
  }

  stateOf(interlockId: string): InterlockState {
    return this.find(interlockId)?.state ?? 'clear';
  }

  /** The first interlock of an action, in the envelope's order, that has acted and is not clear yet. */
  firstActed(action: InterlockAction): Interlock | null {
    for (const { interlock, state } of this.judged) {
      if (state === 'acted' && interlock.action === action) return interlock;
    }
    return null;
  }

  /** Calls back for each interlock that is not clear, in the envelope's order. */
  forEachViolated(visit: (interlock: Interlock, state: InterlockState) => void): void {
    for (const { interlock, state } of this.judged) if (state !== 'clear') visit(interlock, state);
  }

  status(): { id: string; state: InterlockState }[] {
    return this.judged.map(({ interlock, state }) => ({ id: interlock.id, state }));
  }

  private judgeOne(judged: Judged, tS: number): void {
    judged.evaluate();
    /** Only a plain 0 is safe: NaN is not. */
    if (this.truth[0] === 0) {
      if (judged.state === 'acted') this.cleared.push(judged.interlock);
      judged.state = 'clear';
      judged.sinceS = NaN;
      return;
    }
    if (judged.state === 'acted') return;
    if (judged.state === 'clear') judged.sinceS = tS;
    const isDue = tS - judged.sinceS >= judged.interlock.delayS - sameTimeS;
    judged.state = isDue ? 'acted' : 'pending';
    if (isDue) this.acted.push(judged.interlock);
  }

  /** When the interlock came due; in one scan this decides which was first out. */
  private dueS(interlock: Interlock): number {
    return (this.find(interlock.id)?.sinceS ?? NaN) + interlock.delayS;
  }

  private find(interlockId: string): Judged | undefined {
    return this.judged.find(({ interlock }) => interlock.id === interlockId);
  }
}
