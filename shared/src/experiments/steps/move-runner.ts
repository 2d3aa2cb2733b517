import type { StepOf } from '../experiment.schema.js';
import { ActuatorRamp } from './actuator-ramp.js';
import { numericValue, type CompileStepExpression } from './compile-step-expression.js';
import { done, isOver, noSignals, type StepRunner, type StepServices } from './step-runner.js';

/**
 * Ramps actuators to their targets. A target that is no number or outside the envelope ends the run: the
 * experiment has not thought of that case, and the guard is no place to correct it.
 */
export function createMoveRunner(
  step: StepOf<'move'>,
  services: StepServices,
  compile: CompileStepExpression,
): StepRunner {
  const { id, parameters } = step;
  const targets = parameters.targets.map(({ channel, value }, index) => ({
    channel,
    value: numericValue(compile, id, `parameters.targets[${index}].value`, value),
  }));
  const ramp = new ActuatorRamp(services);
  let elapsedS = 0;
  return {
    id,
    kind: step.kind,
    signalNames: [],
    signals: noSignals,
    begin(input) {
      elapsedS = 0;
      const goals = targets.map(({ channel, value }) => ({ channel, value: value(services.lookup) }));
      const reason = ramp.begin(input, goals, parameters.rampS);
      return reason === null ? null : { port: null, reason };
    },
    step(input) {
      if (ramp.step(input)) {
        services.setResult(id, 'durationS', elapsedS);
        return done;
      }
      if (isOver(elapsedS, parameters.timeoutS, services.periodS)) {
        services.setResult(id, 'durationS', elapsedS);
        return { port: 'timeout', reason: `Not at the target after ${parameters.timeoutS} s.` };
      }
      elapsedS += input.dtS;
      return null;
    },
  };
}
