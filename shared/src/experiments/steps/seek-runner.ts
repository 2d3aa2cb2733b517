import type { CompiledExpression } from '../../expressions/expression.types.js';
import type { StepOf } from '../experiment.schema.js';
import { replaceExpressions } from '../seek/expression-tree.js';
import { seekNumericFields } from '../seek/seek-expressions.js';
import { seekSignalNames } from '../seek/seek-signals.js';
import type { SequencerInput } from '../sequencer.types.js';
import { ActuatorRamp, whereHeld } from './actuator-ramp.js';
import type { CompileStepExpression } from './compile-step-expression.js';
import { SeekInput } from './seek-input.js';
import { beginLaw, signalsOf } from './seek-law.js';
import { SeekPursuit } from './seek-pursuit.js';
import { setUpSeek, type SeekNumbers } from './seek-setup.js';
import { averagingTimeS } from './seek-times.js';
import { isOver, type StepExit, type StepRunner, type StepServices } from './step-runner.js';

const converged: StepExit = { port: 'done', reason: 'The estimate has converged.' };
const conditionMet: StepExit = { port: 'done', reason: 'The end condition is met.' };
const outOfNumbers: StepExit = {
  port: 'failed',
  reason: 'The law gave no number: gain or objective are beyond all measure.',
};
const timeOver: StepExit = { port: 'done', reason: 'The time is over.' };

/**
 * Steers actuators by a seeking law. First they ramp into their boxes, all arriving together, then it seeks; at its
 * end the dither ends and the bases go to the estimates averaged over the last whole period of the slowest dither.
 */
export class SeekRunner implements StepRunner {
  readonly id: string;
  readonly kind = 'seek';
  readonly signalNames: string[];
  readonly signals: Float64Array;
  private readonly channels: readonly string[];
  private readonly expressions: ReadonlyMap<string, CompiledExpression>;
  private readonly when: CompiledExpression | null;
  private readonly input: SeekInput;
  private readonly ramp: ActuatorRamp;
  private pursuit: SeekPursuit | null = null;
  private isApproaching = true;
  private elapsedS = 0;
  private exit: StepExit | null = null;
  private best: number[] = [];
  private partedS = 0;

  constructor(
    private readonly settings: StepOf<'seek'>,
    private readonly services: StepServices,
    compile: CompileStepExpression,
  ) {
    this.id = settings.id;
    const { law, actuators, wideSearch, end, constraint } = settings.parameters;
    this.channels = actuators.map(({ channel }) => channel);
    this.signalNames = seekSignalNames(signalsOf(law.id, wideSearch !== null), this.channels);
    this.signals = new Float64Array(this.signalNames.length).fill(NaN);
    this.expressions = new Map(
      seekNumericFields(settings.parameters).flatMap(({ field, parameter }) =>
        typeof parameter === 'number' ? [] : [[field, compile(this.id, field, parameter.expression)]],
      ),
    );
    this.when = end.when === null ? null : compile(this.id, 'parameters.end.when', end.when);
    const constrained =
      constraint && compile(this.id, 'parameters.constraint.expression', constraint.expression);
    const direction = services.objective?.direction ?? 'maximise';
    this.input = new SeekInput(settings.parameters, direction, constrained, services.lookup);
    this.ramp = new ActuatorRamp(services);
  }

  begin(input: SequencerInput): StepExit | null {
    const { services } = this;
    const numbers = replaceExpressions(
      this.settings.parameters,
      'parameters',
      (_, field) => this.expressions.get(field)?.evaluate(services.lookup) ?? NaN,
    );
    const setup = setUpSeek(numbers, (channel) => services.limitOf(channel), services.periodS);
    if (typeof setup === 'string') return { port: 'failed', reason: setup };
    const start = this.channels.map((channel) => whereHeld(input, channel));
    const lost = this.channels.find((_, i) => !Number.isFinite(start[i]));
    if (lost !== undefined) return { port: 'failed', reason: `It is not known where "${lost}" stands.` };
    const law = beginLaw(numbers.law.id, setup.parameters, setup.visit, start);
    const reason = this.ramp.begin(input, this.targets(law.state.estimate), 0);
    if (reason !== null) return { port: 'failed', reason };
    const periodS = averagingTimeS(numbers.law.id, law.core.trialS, this.channels.length, services.periodS);
    this.pursuit = new SeekPursuit(
      {
        channels: this.channels,
        law,
        input: this.input,
        bound: numbers.constraint?.bound ?? NaN,
        periodS,
        convergence: convergenceOf(numbers),
      },
      services,
    );
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
    if (!pursuit.step(input, (reason) => this.noteRetreat(pursuit, reason))) return outOfNumbers;
    this.signals.set(pursuit.law.state.signals);
    this.exit = this.judgeEnd(pursuit);
    if (!this.exit) return this.goOn(input, false);
    this.leaveResults(pursuit, this.exit);
    const reason = this.ramp.begin(input, this.targets(this.best), 0, 'applied');
    return reason === null ? this.part(input, this.exit) : this.exit;
  }

  private targets(values: ArrayLike<number>): { channel: string; value: number }[] {
    return this.channels.map((channel, i) => ({ channel, value: values[i] ?? NaN }));
  }

  private goOn(input: SequencerInput, isLost: boolean): StepExit | null {
    this.elapsedS += input.dtS;
    if (!isLost) return null;
    return { port: 'failed', reason: `${this.names()} did not come into the box.` };
  }

  private names(): string {
    return this.channels.map((channel) => `"${channel}"`).join(', ');
  }

  private noteRetreat({ law }: SeekPursuit, reason: string): void {
    const { estimate } = law.state;
    const point = Object.fromEntries(this.channels.map((channel, i) => [channel, estimate[i] ?? NaN]));
    this.services.emit({ type: 'seek.retreated', step: this.id, to: estimate[0] ?? NaN, point, reason });
  }

  private judgeEnd(pursuit: SeekPursuit): StepExit | null {
    const { end, invalidForS } = this.settings.parameters;
    if (pursuit.invalidS > invalidForS) {
      return { port: 'failed', reason: `The objective was not valid for ${invalidForS} s.` };
    }
    if (pursuit.hasConverged()) return converged;
    if (this.when && this.when.evaluate(this.services.lookup) === 1) return conditionMet;
    return isOver(this.elapsedS, end.afterS, this.services.periodS) ? timeOver : null;
  }

  private leaveResults(pursuit: SeekPursuit, exit: StepExit): void {
    const { lowest, highest } = pursuit.law.state;
    this.best = pursuit.best();
    const isAtEdge = this.best.some((best, i) => best <= (lowest[i] ?? NaN) || best >= (highest[i] ?? NaN));
    const leave = (suffix: string, value: number) => this.services.setResult(this.id, suffix, value);
    this.channels.forEach((channel, i) => leave(`best.${channel}`, this.best[i] ?? NaN));
    leave('objective', pursuit.periods.meanObjective);
    leave('objectiveAtStart', pursuit.periods.objectiveAtStart);
    leave('durationS', this.elapsedS);
    leave('isConverged', exit === converged ? 1 : 0);
    leave('isAtEdge', isAtEdge ? 1 : 0);
  }

  /** At the slew limit to the averaged estimates, which takes the dither out without a jump. */
  private part(input: SequencerInput, exit: StepExit): StepExit | null {
    const hasArrived = this.ramp.step(input);
    const isHeld = this.channels.every((channel, i) => {
      const best = this.best[i] ?? NaN;
      return Math.abs(input.held(channel) - best) <= Math.abs(best) * 1e-9;
    });
    if ((hasArrived && isHeld) || this.ramp.isOverdue(this.partedS)) return exit;
    this.partedS += input.dtS;
    return null;
  }
}

/** The band is given for the first actuator; each other one's is as large beside its amplitude. */
function convergenceOf({ end, actuators }: SeekNumbers): { bands: number[]; forS: number } | null {
  if (end.whenConverged === null) return null;
  const { band, forS } = end.whenConverged;
  const first = actuators[0]?.amplitude ?? NaN;
  return { bands: actuators.map(({ amplitude }, i) => (i === 0 ? band : (band * amplitude) / first)), forS };
}
