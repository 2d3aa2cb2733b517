import type { StepOf } from '../experiment.schema.js';
import type { SequencerInput } from '../sequencer.types.js';
import { readSurvey } from '../survey/read-survey.js';
import { surveyBacklash } from '../survey/survey-backlash.js';
import { SurveyPlaces, type SurveyMeasurement } from '../survey/survey-places.js';
import { planSurvey, type SurveyedRange, type SurveyVisit } from '../survey/survey-plan.js';
import { ActuatorRamp } from './actuator-ramp.js';
import { numericValue, type CompileStepExpression, type NumericValue } from './compile-step-expression.js';
import { ObjectiveAverage } from './objective-average.js';
import { done, isOver, noSignals, type StepExit, type StepRunner, type StepServices } from './step-runner.js';

/**
 * Maps the objective over one actuator or two. At each point it moves at the slew limit, settles, and averages the
 * objective; it ends where its last visit was. A point is valid where nine tenths of its scans were.
 */
export class SurveyRunner implements StepRunner {
  readonly id: string;
  readonly kind = 'survey';
  readonly signalNames = [];
  readonly signals = noSignals;
  private readonly ends: readonly { from: NumericValue; to: NumericValue }[];
  private readonly ramp: ActuatorRamp;
  private readonly average = new ObjectiveAverage();
  private readonly measured: SurveyMeasurement[] = [];
  private readonly scatter = { squares: 0, freedom: 0 };
  private ranges: SurveyedRange[] = [];
  private visits: SurveyVisit[] = [];
  private at = 0;
  private phase: 'moving' | 'settling' | 'averaging' | 'reading' = 'moving';
  /** Once all is measured. */
  private places: SurveyPlaces | null = null;
  private backlashesRead = 0;
  private phaseS = 0;

  constructor(
    private readonly settings: StepOf<'survey'>,
    private readonly services: StepServices,
    compile: CompileStepExpression,
  ) {
    this.id = settings.id;
    this.ends = settings.parameters.actuators.map(({ from, to }, i) => ({
      from: numericValue(compile, this.id, `parameters.actuators[${i}].from`, from),
      to: numericValue(compile, this.id, `parameters.actuators[${i}].to`, to),
    }));
    this.ramp = new ActuatorRamp(services);
  }

  begin(input: SequencerInput): StepExit | null {
    const { lookup } = this.services;
    this.ranges = this.settings.parameters.actuators.map(({ points, isUpAndDown }, i) => ({
      from: this.ends[i]?.from(lookup) ?? NaN,
      to: this.ends[i]?.to(lookup) ?? NaN,
      points,
      isUpAndDown,
    }));
    // Written so that an end which is no number has no span either.
    const empty = this.ranges.find(({ from, to }) => !(Math.abs(to - from) > 0));
    if (empty) return failed(`There is nothing to survey from ${empty.from} to ${empty.to}.`);
    this.measured.length = 0;
    this.places = null;
    this.scatter.squares = 0;
    this.scatter.freedom = 0;
    this.visits = planSurvey(this.ranges);
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
    if (this.phase === 'reading') return this.readOn();
    const { settleS, averageS } = this.settings.parameters;
    const { periodS } = this.services;
    if (this.phase === 'settling' && isOver(this.phaseS, settleS, periodS)) this.enter('averaging');
    if (this.phase === 'averaging') this.average.add(input.objective);
    this.phaseS += input.dtS;
    if (this.phase !== 'averaging' || !isOver(this.phaseS, averageS, periodS)) return null;
    this.note(input);
    this.at += 1;
    return this.at < this.visits.length ? this.beginVisit(input) : this.beginReading();
  }

  private get visit(): SurveyVisit {
    return this.visits[this.at] as SurveyVisit;
  }

  private get channels(): string[] {
    return this.settings.parameters.actuators.map(({ channel }) => channel);
  }

  private enter(phase: SurveyRunner['phase']): void {
    this.phase = phase;
    this.phaseS = 0;
    this.average.clear();
  }

  private beginVisit(input: SequencerInput): StepExit | null {
    this.enter('moving');
    const targets = this.visit.map(({ target }, i) => ({ channel: this.channels[i] ?? '', value: target }));
    const reason = this.ramp.begin(input, targets, 0);
    return reason === null ? null : failed(reason);
  }

  private giveUpWaiting(input: SequencerInput): StepExit | null {
    this.phaseS += input.dtS;
    if (!this.ramp.isOverdue(this.phaseS)) return null;
    const wanted = this.visit.map(({ target }, i) => `"${this.channels[i]}" did not come to ${target}`);
    return failed(`${wanted.join(', or ')}.`);
  }

  private note(input: SequencerInput): void {
    const { mean, standardError, isValid, scatter } = this.average;
    const applied = this.visit.map(({ target }, i) => {
      const value = input.applied(this.channels[i] ?? '');
      return Number.isFinite(value) ? value : target;
    });
    this.measured.push({ visit: this.visit, applied, objective: mean, standardError, isValid });
    this.scatter.squares += scatter.squares;
    this.scatter.freedom += scatter.freedom;
    const [first, second] = this.visit.map(({ branch }, i) => ({
      actuator: this.channels[i] ?? '',
      value: applied[i] ?? NaN,
      branch,
    }));
    if (!first) return;
    this.services.emit({
      type: 'survey.point-measured',
      step: this.id,
      ...first,
      objective: Number.isFinite(mean) ? mean : null,
      standardError: Number.isFinite(standardError) ? standardError : null,
      isValid,
      ...(second ? { second } : {}),
    });
  }

  private beginReading(): StepExit | null {
    this.enter('reading');
    this.places = new SurveyPlaces(this.ranges, this.measured);
    this.backlashesRead = 0;
    const direction = this.services.objective?.direction ?? 'maximise';
    const findings = readSurvey(this.places, direction, this.settings.parameters.choose);
    if (!findings) return failed('The objective was valid nowhere.');
    const { best, curvatures, peaks, prominence, hysteresis } = findings;
    this.channels.forEach((channel, i) => {
      this.leave(`best.${channel}`, best.values[i] ?? NaN);
      this.leave(`curvature.${channel}`, Math.abs(curvatures[i]?.value ?? NaN));
      this.leave(`curvatureError.${channel}`, curvatures[i]?.standardError ?? NaN);
    });
    this.leave('best.objective', best.objective);
    this.leave('peaks', peaks);
    this.leave('prominence', prominence);
    this.leave('hysteresis', hysteresis);
    this.leave('noise', Math.sqrt(this.scatter.squares / this.scatter.freedom));
    return null;
  }

  /** The backlash of one actuator a scan, so that no scan takes long. */
  private readOn(): StepExit | null {
    const channel = this.channels[this.backlashesRead];
    if (channel === undefined || !this.places) return done;
    const { value, standardError } = surveyBacklash(this.places, this.backlashesRead);
    this.leave(`backlash.${channel}`, value);
    this.leave(`backlashError.${channel}`, standardError);
    this.backlashesRead += 1;
    return this.backlashesRead < this.channels.length ? null : done;
  }

  private leave(suffix: string, value: number): void {
    this.services.setResult(this.id, suffix, value);
  }
}

const failed = (reason: string): StepExit => ({ port: 'failed', reason });
