import type { CompiledExpression } from '../../expressions/expression.types.js';
import { gradientLaw, type GradientLawState } from '../../seeking/gradient-law.js';
import type { SeekingInput } from '../../seeking/seeking-law.js';
import { isUsable } from '../../seeking/usable-number.js';
import type { StepOf } from '../experiment.schema.js';
import type { SequencerInput } from '../sequencer.types.js';
import { ActuatorRamp, whereHeld } from './actuator-ramp.js';
import { numericValue, type CompileStepExpression, type NumericValue } from './compile-step-expression.js';
import { SeekCatchUp } from './seek-catch-up.js';
import { SeekPeriods } from './seek-periods.js';
import { SeekRetreat } from './seek-retreat.js';
import { setUpSeek } from './seek-setup.js';
import { StayWithin } from './stay-within.js';
import { isOver, type StepExit, type StepRunner, type StepServices } from './step-runner.js';

const converged: StepExit = { port: 'done', reason: 'The estimate has converged.' };
const conditionMet: StepExit = { port: 'done', reason: 'The end condition is met.' };
const outOfNumbers: StepExit = {
  port: 'failed',
  reason: 'The law gave no number: gain or objective are beyond all measure.',
};
const timeOver: StepExit = { port: 'done', reason: 'The time is over.' };

/** What one Seek keeps while it seeks. */
interface Pursuit {
  law: GradientLawState;
  periods: SeekPeriods;
  retreat: SeekRetreat;
  catchUp: SeekCatchUp;
  convergence: StayWithin | null;
  /** The law adapted all through the present dither period. */
  isAdapting: boolean;
}

/**
 * Steers one actuator by the gradient law. First it ramps into its box, then it seeks; at its end the dither
 * ends and the base goes to the estimate averaged over the last whole dither period. The law climbs: an
 * objective to be minimised is fed with its sign turned, and the inner signals are of what is fed.
 */
export class SeekRunner implements StepRunner {
  readonly id: string;
  readonly kind = 'seek';
  readonly signalNames = gradientLaw.signalNames(1);
  readonly signals = new Float64Array(this.signalNames.length).fill(NaN);
  private readonly numbers: Record<'amplitude' | 'periodS' | 'gain', NumericValue>;
  private readonly when: CompiledExpression | null;
  private readonly ramp: ActuatorRamp;
  private readonly fed: SeekingInput = { objective: NaN, isValid: false };
  private pursuit: Pursuit | null = null;
  private isApproaching = true;
  private elapsedS = 0;
  private exit: StepExit | null = null;
  private best = NaN;
  private partedS = 0;

  constructor(
    private readonly settings: StepOf<'seek'>,
    private readonly services: StepServices,
    compile: CompileStepExpression,
  ) {
    this.id = settings.id;
    const { ditherAmplitude, ditherPeriodS, gain, end } = settings.parameters;
    this.numbers = {
      amplitude: numericValue(compile, this.id, 'parameters.ditherAmplitude', ditherAmplitude),
      periodS: numericValue(compile, this.id, 'parameters.ditherPeriodS', ditherPeriodS),
      gain: numericValue(compile, this.id, 'parameters.gain', gain),
    };
    this.when = end.when === null ? null : compile(this.id, 'parameters.end.when', end.when);
    this.ramp = new ActuatorRamp(services);
  }

  begin(input: SequencerInput): StepExit | null {
    const { actuator, end } = this.settings.parameters;
    const { lookup } = this.services;
    const { amplitude, periodS, gain } = this.numbers;
    const numbers = { amplitude: amplitude(lookup), periodS: periodS(lookup), gain: gain(lookup) };
    const parameters = setUpSeek(this.settings, numbers, this.services.limitOf(actuator));
    if (typeof parameters === 'string') return { port: 'failed', reason: parameters };
    const start = whereHeld(input, actuator);
    if (!Number.isFinite(start))
      return { port: 'failed', reason: `It is not known where "${actuator}" stands.` };
    const law = gradientLaw.init(parameters, [start]);
    const reason = this.ramp.begin(input, [{ channel: actuator, value: estimateOf(law) }], 0);
    if (reason !== null) return { port: 'failed', reason };
    this.pursuit = {
      law,
      periods: new SeekPeriods(numbers.periodS),
      retreat: new SeekRetreat(numbers.periodS),
      catchUp: new SeekCatchUp(this.services, actuator),
      // Means of fewer than two periods cannot show that the estimate stands still.
      convergence: end.whenConverged && new StayWithin(Math.max(end.whenConverged.forS, 2 * numbers.periodS)),
      isAdapting: false,
    };
    this.isApproaching = true;
    this.elapsedS = 0;
    this.exit = null;
    this.partedS = 0;
    return null;
  }

  step(input: SequencerInput): StepExit | null {
    const { pursuit } = this;
    if (!pursuit) return { port: 'failed', reason: 'The step was not begun.' };
    this.signals.fill(NaN);
    if (this.exit) return this.part(input, this.exit);
    if (this.isApproaching) {
      this.isApproaching = !this.ramp.step(input);
      if (this.isApproaching) return this.goOn(input, this.ramp.isOverdue(this.elapsedS));
    }
    if (!this.seek(input, pursuit)) return outOfNumbers;
    this.exit = this.judgeEnd(pursuit);
    if (!this.exit) return this.goOn(input, false);
    this.leaveResults(pursuit, this.exit);
    const goal = [{ channel: this.settings.parameters.actuator, value: this.best }];
    const reason = this.ramp.begin(input, goal, 0, 'applied');
    return reason === null ? this.part(input, this.exit) : this.exit;
  }

  private goOn(input: SequencerInput, isLost: boolean): StepExit | null {
    this.elapsedS += input.dtS;
    if (!isLost) return null;
    return { port: 'failed', reason: `"${this.settings.parameters.actuator}" did not come into the box.` };
  }

  /** One scan of the law, and what is kept of it. @returns false where the law has no number to work with */
  private seek(input: SequencerInput, pursuit: Pursuit): boolean {
    const { law, periods, retreat } = pursuit;
    const { objective } = input;
    const sign = this.services.objective?.direction === 'minimise' ? -1 : 1;
    this.fed.objective = sign * objective.value;
    this.fed.isValid = objective.isValid && Number.isFinite(objective.value);
    if (this.fed.isValid && !isUsable(this.fed.objective)) return false;
    gradientLaw.step(law, this.fed, input.dtS);
    const estimate = estimateOf(law);
    const dither = law.dither[0] ?? NaN;
    const base = pursuit.catchUp.follow(input, estimate, dither, this.fed.isValid);
    this.services.request(this.settings.parameters.actuator, base, dither);
    this.signals.set(law.signals);
    if (retreat.note(this.fed.isValid, input.dtS)) {
      const reason = objective.whyInvalid ?? 'The objective is not valid.';
      this.services.emit({ type: 'seek.retreated', step: this.id, to: estimate, reason });
    }
    if (!this.fed.isValid) {
      periods.interrupt();
      pursuit.convergence?.clear();
      pursuit.isAdapting = false;
    } else if (periods.add(estimate, objective, input.dtS)) {
      if (pursuit.isAdapting) pursuit.convergence?.add(periods.lastEstimate, law.trialS);
      pursuit.isAdapting = law.settleS <= 0;
    }
    return true;
  }

  private judgeEnd({ retreat, convergence, law }: Pursuit): StepExit | null {
    const { end, invalidForS } = this.settings.parameters;
    const { periodS } = this.services;
    if (retreat.lastedS > invalidForS) {
      return { port: 'failed', reason: `The objective was not valid for ${invalidForS} s.` };
    }
    if (end.whenConverged && convergence?.hasStayed(end.whenConverged.band, law.trialS / 2)) {
      return converged;
    }
    if (this.when && this.when.evaluate(this.services.lookup) === 1) return conditionMet;
    return isOver(this.elapsedS, end.afterS, periodS) ? timeOver : null;
  }

  private leaveResults({ law, periods }: Pursuit, exit: StepExit): void {
    const [min = NaN] = law.lowest;
    const [max = NaN] = law.highest;
    const mean = periods.lastEstimate;
    this.best = Number.isNaN(mean) ? estimateOf(law) : Math.min(Math.max(mean, min), max);
    const leave = (suffix: string, value: number) => this.services.setResult(this.id, suffix, value);
    leave(`best.${this.settings.parameters.actuator}`, this.best);
    leave('objective', periods.meanObjective);
    leave('objectiveAtStart', periods.objectiveAtStart);
    leave('durationS', this.elapsedS);
    leave('isConverged', exit === converged ? 1 : 0);
    leave('isAtEdge', this.best <= min || this.best >= max ? 1 : 0);
  }

  /** At the slew limit to the averaged estimate, which takes the dither out without a jump. */
  private part(input: SequencerInput, exit: StepExit): StepExit | null {
    const { actuator } = this.settings.parameters;
    const hasArrived = this.ramp.step(input);
    const isHeld = Math.abs(input.held(actuator) - this.best) <= Math.abs(this.best) * 1e-9;
    if ((hasArrived && isHeld) || this.ramp.isOverdue(this.partedS)) return exit;
    this.partedS += input.dtS;
    return null;
  }
}

/** Estimate of the only actuator, its unit. */
function estimateOf({ estimate }: GradientLawState): number {
  return estimate[0] ?? NaN;
}
