import type { SequencerInput } from '../sequencer.types.js';
import { SeekCatchUp } from './seek-catch-up.js';
import type { SeekInput } from './seek-input.js';
import { bestKnown, isSearching, isTravelling, type LawAtWork } from './seek-law.js';
import { SeekPeriods } from './seek-periods.js';
import { SeekRetreat } from './seek-retreat.js';
import { StayWithin } from './stay-within.js';
import type { StepServices } from './step-runner.js';

export interface PursuitSetup {
  channels: readonly string[];
  law: LawAtWork;
  input: SeekInput;
  /** Bound of the constrained quantity; NaN where there is none. */
  bound: number;
  /** Over what estimates and objective are averaged, s. */
  periodS: number;
  /** Band of each actuator and time within it that count as convergence; null for none. */
  convergence: { bands: readonly number[]; forS: number } | null;
}

/** One Seek while it seeks: the law scan by scan, and what is kept of it. */
export class SeekPursuit {
  readonly periods: SeekPeriods;
  private readonly retreat: SeekRetreat;
  private readonly catchUp: SeekCatchUp;
  private readonly watches: readonly StayWithin[];
  /** The law adapted all through the present period. */
  private isAdapting = false;
  private wasSearching = false;

  constructor(
    private readonly setup: PursuitSetup,
    private readonly services: StepServices,
  ) {
    const { channels, periodS, convergence } = setup;
    this.periods = new SeekPeriods(periodS, channels.length);
    this.retreat = new SeekRetreat(periodS);
    this.catchUp = new SeekCatchUp(services, channels);
    // Means of fewer than two periods cannot show that an estimate stands still.
    const forS = Math.max(convergence?.forS ?? 0, 2 * periodS);
    this.watches = convergence ? channels.map(() => new StayWithin(forS)) : [];
  }

  get law(): LawAtWork {
    return this.setup.law;
  }

  /** Time for which the objective has been invalid, s. */
  get invalidS(): number {
    return this.retreat.lastedS;
  }

  /**
   * One scan of the law. While actuators are on their way back from a pause, or to the next point of a wide search,
   * the law waits for them.
   *
   * @param onRetreat told once when the law goes back to its last good point, and why
   * @returns false where the law has no number to work with
   */
  step(input: SequencerInput, onRetreat: (reason: string) => void): boolean {
    const { law, input: told, bound } = this.setup;
    const { state } = law;
    if (!told.read(input, bound)) return false;
    if (this.catchUp.isDisplaced(input) || (this.catchUp.isBehind && isTravelling(law))) {
      this.catchUp.follow(input, state);
      return true;
    }
    law.step(told.fed, input.dtS);
    this.catchUp.follow(input, state);
    this.note(input, onRetreat);
    return true;
  }

  hasConverged(): boolean {
    const { convergence, periodS } = this.setup;
    return (
      convergence !== null &&
      !isSearching(this.law) &&
      this.watches.every((watch, i) => watch.hasStayed(convergence.bands[i] ?? NaN, periodS / 2))
    );
  }

  /** Where each actuator is best, its unit: the estimate averaged over the last whole period, inside its box. */
  best(): number[] {
    const { lowest, highest } = this.law.state;
    const known = bestKnown(this.law);
    return this.setup.channels.map((_, i) => {
      const mean = isSearching(this.law) ? NaN : (this.periods.lastEstimates[i] as number);
      if (Number.isNaN(mean)) return known[i] ?? NaN;
      return Math.min(Math.max(mean, lowest[i] as number), highest[i] as number);
    });
  }

  private note(input: SequencerInput, onRetreat: (reason: string) => void): void {
    const { law, periodS, input: told } = this.setup;
    const { state } = law;
    const isNowSearching = isSearching(law);
    // On a round the objective is looked at here and there: what was averaged before is of another place.
    const isBroken = state.isRetreated || isNowSearching || this.wasSearching;
    this.wasSearching = isNowSearching;
    if (!isNowSearching && this.retreat.note(!state.isRetreated, input.dtS)) {
      onRetreat(told.whyRetreated(input));
    }
    if (isBroken) {
      this.periods.interrupt();
      for (const watch of this.watches) watch.clear();
      this.isAdapting = false;
    } else if (this.periods.add(state.estimate, input.objective, input.dtS)) {
      if (this.isAdapting) {
        this.watches.forEach((watch, i) => watch.add(this.periods.lastEstimates[i] as number, periodS));
      }
      this.isAdapting = state.settleS <= 0;
    }
  }
}
