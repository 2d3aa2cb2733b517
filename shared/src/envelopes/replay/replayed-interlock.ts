import { compileExpression } from '../../expressions/compile-expression.js';
import type { CompiledExpression } from '../../expressions/expression.types.js';
import type { SymbolSet } from '../../expressions/symbol-set.js';
import type { Readings } from '../../scan/readings.js';
import type { Interlock } from '../envelope.schema.js';
import { JudgedInterlock, type InterlockTurn } from '../judged-interlock.js';
import { marginTo, simpleThreshold, type SimpleThreshold } from '../simple-threshold.js';
import { Least } from './extreme.js';
import { replayEpisodesMax, type ReplayedInterlock } from './replay-report.schema.js';

/** One interlock of a draft on its way through a record: judged by the code that judges it in the scan. */
export class ReplayedInterlockJudge {
  readonly judged: JudgedInterlock | null;
  private readonly whyNotJudged: string | null;
  private readonly episodes: ReplayedInterlock['episodes'] = [];
  private readonly threshold: SimpleThreshold | null;
  private readonly thresholdIndex: number;
  private readonly margin = new Least();
  private acts = 0;
  private totalS = 0;
  private actedSinceS = NaN;
  private nearMisses = 0;
  private longestNearMissS = 0;
  private badScans = 0;
  private scans = 0;
  private isTrueAtStart = false;

  constructor(
    readonly interlock: Interlock,
    symbols: SymbolSet,
    private readonly readings: Readings,
  ) {
    const compiled = compileBoth(interlock, symbols);
    this.whyNotJudged = typeof compiled === 'string' ? compiled : null;
    this.judged = typeof compiled === 'string' ? null : this.judge(compiled);
    this.threshold = simpleThreshold(interlock.condition);
    this.thresholdIndex = this.threshold ? readings.indexOf(this.threshold.channel) : -1;
  }

  /** @returns whether it acted or cleared in this scan */
  scan(tS: number): InterlockTurn {
    const { judged } = this;
    if (!judged) return null;
    const [before, sinceS] = [judged.state, judged.sinceS];
    const turn = judged.judge(tS);
    if (this.threshold)
      this.margin.take(marginTo(this.threshold, this.readings.goodValue(this.thresholdIndex)), tS);
    if (this.scans === 0) this.isTrueAtStart = judged.state !== 'clear';
    this.scans += 1;
    if (turn === 'acted') {
      this.acts += 1;
      this.actedSinceS = tS;
    }
    if (before === 'pending' && judged.state === 'clear') this.noteNearMiss(tS - sinceS);
    if (before === 'acted' && judged.state !== 'acted') this.closeEpisode(tS, false);
    return turn;
  }

  /** A bypass in the record ends the episode: the interlock is pending again. */
  bypassUntil(untilS: number, tS: number): void {
    if (!this.judged) return;
    if (this.judged.state === 'acted') this.closeEpisode(tS, false);
    this.judged.bypassUntil(untilS);
  }

  report(untilTS: number): ReplayedInterlock {
    if (!Number.isNaN(this.actedSinceS)) this.closeEpisode(untilTS, true);
    const { id, title, action } = this.interlock;
    const { whyNotJudged, acts, episodes, totalS, isTrueAtStart, nearMisses, longestNearMissS, badScans } =
      this;
    return {
      id,
      title,
      action,
      whyNotJudged,
      acts,
      episodes,
      totalS,
      isTrueAtStart,
      nearMisses,
      longestNearMissS,
      badScans,
      leastMargin: whyNotJudged === null ? this.margin.found : null,
      marginChannel: this.threshold?.channel ?? null,
    };
  }

  private judge({ condition, clearCondition }: Compiled): JudgedInterlock {
    const truth = new Float64Array(1);
    const evaluate = condition.bind(this.readings, truth);
    const isViolated = () => {
      evaluate();
      if (Number.isNaN(truth[0])) this.badScans += 1;
    };
    const mayClear = clearCondition?.bind(this.readings, truth) ?? null;
    return new JudgedInterlock(this.interlock, isViolated, mayClear, truth);
  }

  private noteNearMiss(heldS: number): void {
    this.nearMisses += 1;
    this.longestNearMissS = Math.max(this.longestNearMissS, heldS);
  }

  private closeEpisode(tS: number, isOpen: boolean): void {
    const durationS = tS - this.actedSinceS;
    this.totalS += durationS;
    if (this.episodes.length < replayEpisodesMax) {
      this.episodes.push({ fromTS: this.actedSinceS, durationS, isOpen });
    }
    this.actedSinceS = NaN;
  }
}

interface Compiled {
  condition: CompiledExpression;
  clearCondition: CompiledExpression | null;
}

/** @returns why it cannot be judged, in words, where it cannot */
function compileBoth(interlock: Interlock, symbols: SymbolSet): Compiled | string {
  const condition = compileFor(interlock.condition, symbols);
  if (typeof condition === 'string') return condition;
  if (interlock.clearCondition === null) return { condition, clearCondition: null };
  const clearCondition = compileFor(interlock.clearCondition, symbols);
  return typeof clearCondition === 'string' ? clearCondition : { condition, clearCondition };
}

function compileFor(text: string, symbols: SymbolSet): CompiledExpression | string {
  const outcome = compileExpression(text, symbols);
  if (!outcome.isOk) return `With the wiring of this run: ${outcome.message}`;
  const [trace] = outcome.expression.traceSymbols;
  if (trace !== undefined) return `It reads the trace "${trace}": a replay looks at numbers only.`;
  return outcome.expression;
}
