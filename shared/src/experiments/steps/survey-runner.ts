import type { StepOf } from '../experiment.schema.js';
import type { SequencerInput } from '../sequencer.types.js';
import { ActuatorRamp } from './actuator-ramp.js';
import { numericValue, type CompileStepExpression, type NumericValue } from './compile-step-expression.js';
import { ObjectiveAverage } from './objective-average.js';
import { done, isOver, noSignals, type StepExit, type StepRunner, type StepServices } from './step-runner.js';
import { judgeSurvey, type SurveyPoint } from './survey-landscape.js';
import { planSurvey, type Branch, type SurveyVisit } from './survey-plan.js';

/**
 * Maps the objective over one actuator. At each value it moves at the slew limit, settles, and averages the
 * objective; it ends where its last visit was. A value is valid where nine tenths of its scans were.
 */
export class SurveyRunner implements StepRunner {
  readonly id: string;
  readonly kind = 'survey';
  readonly signalNames = [];
  readonly signals = noSignals;
  private readonly from: NumericValue;
  private readonly to: NumericValue;
  private readonly ramp: ActuatorRamp;
  private readonly average = new ObjectiveAverage();
  private readonly measured: Record<Branch, SurveyPoint[]> = { up: [], down: [] };
  private visits: SurveyVisit[] = [];
  private at = 0;
  private phase: 'moving' | 'settling' | 'averaging' = 'moving';
  private phaseS = 0;

  constructor(
    private readonly settings: StepOf<'survey'>,
    private readonly services: StepServices,
    compile: CompileStepExpression,
  ) {
    this.id = settings.id;
    this.from = numericValue(compile, this.id, 'parameters.from', settings.parameters.from);
    this.to = numericValue(compile, this.id, 'parameters.to', settings.parameters.to);
    this.ramp = new ActuatorRamp(services);
  }

  begin(input: SequencerInput): StepExit | null {
    const { points, isUpAndDown } = this.settings.parameters;
    const from = this.from(this.services.lookup);
    const to = this.to(this.services.lookup);
    // Written so that an end which is no number has no span either.
    if (!(Math.abs(to - from) > 0)) return failed(`There is nothing to survey from ${from} to ${to}.`);
    this.measured.up.length = 0;
    this.measured.down.length = 0;
    this.visits = planSurvey(from, to, points, isUpAndDown);
    this.at = 0;
    return this.beginVisit(input);
  }

  step(input: SequencerInput): StepExit | null {
    if (this.phase === 'moving') {
      if (!this.ramp.step(input)) return this.giveUpWaiting(input);
      this.enter('settling');
    } else {
      // Past its line the ramp holds the target, without asking for more than this scan can move.
      this.ramp.step(input);
    }
    const { settleS, averageS } = this.settings.parameters;
    const { periodS } = this.services;
    if (this.phase === 'settling' && isOver(this.phaseS, settleS, periodS)) this.enter('averaging');
    if (this.phase === 'averaging') this.average.add(input.objective);
    this.phaseS += input.dtS;
    if (this.phase !== 'averaging' || !isOver(this.phaseS, averageS, periodS)) return null;
    this.note(input);
    this.at += 1;
    return this.at < this.visits.length ? this.beginVisit(input) : this.conclude();
  }

  private get visit(): SurveyVisit {
    return this.visits[this.at] as SurveyVisit;
  }

  private enter(phase: SurveyRunner['phase']): void {
    this.phase = phase;
    this.phaseS = 0;
    this.average.clear();
  }

  private beginVisit(input: SequencerInput): StepExit | null {
    const { actuator } = this.settings.parameters;
    this.enter('moving');
    const reason = this.ramp.begin(input, [{ channel: actuator, value: this.visit.target }], 0);
    return reason === null ? null : failed(reason);
  }

  private giveUpWaiting(input: SequencerInput): StepExit | null {
    this.phaseS += input.dtS;
    if (!this.ramp.isOverdue(this.phaseS)) return null;
    return failed(`"${this.settings.parameters.actuator}" did not come to ${this.visit.target}.`);
  }

  private note(input: SequencerInput): void {
    const { actuator } = this.settings.parameters;
    const { branch, index } = this.visit;
    const { mean, standardError, isValid } = this.average;
    const applied = input.applied(actuator);
    const value = Number.isFinite(applied) ? applied : this.visit.target;
    this.measured[branch][index] = { value, objective: mean, standardError, isValid };
    this.services.emit({
      type: 'survey.point-measured',
      step: this.id,
      actuator,
      value,
      objective: Number.isFinite(mean) ? mean : null,
      standardError: Number.isFinite(standardError) ? standardError : null,
      branch,
      isValid,
    });
  }

  private conclude(): StepExit {
    const direction = this.services.objective?.direction ?? 'maximise';
    const findings = judgeSurvey(this.measured.up, this.measured.down, direction);
    if (!findings) return failed('The objective was valid nowhere.');
    const { actuator } = this.settings.parameters;
    this.services.setResult(this.id, `best.${actuator}`, findings.best.value);
    this.services.setResult(this.id, 'best.objective', findings.best.objective);
    this.services.setResult(this.id, 'hysteresis', findings.hysteresis);
    this.services.setResult(this.id, 'peaks', findings.peaks);
    return done;
  }
}

const failed = (reason: string): StepExit => ({ port: 'failed', reason });
