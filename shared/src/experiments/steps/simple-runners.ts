import type { StepOf } from '../experiment.schema.js';
import type { CompileStepExpression } from './compile-step-expression.js';
import { ObjectiveAverage } from './objective-average.js';
import { done, isOver, noSignals, type StepRunner, type StepServices } from './step-runner.js';

/** Start leads on at once; Finish is known to the sequencer, which ends the run there. */
export function createPassingRunner(step: StepOf<'start'> | StepOf<'finish'>): StepRunner {
  return {
    id: step.id,
    kind: step.kind,
    signalNames: [],
    signals: noSignals,
    begin: () => null,
    step: () => done,
  };
}

/** Holds everything for a time and leaves the mean objective behind, where enough of it was valid. */
export function createHoldRunner(step: StepOf<'hold'>, services: StepServices): StepRunner {
  const average = new ObjectiveAverage();
  let heldS = 0;
  return {
    id: step.id,
    kind: step.kind,
    signalNames: [],
    signals: noSignals,
    begin() {
      average.clear();
      heldS = 0;
      return null;
    },
    step(input) {
      if (isOver(heldS, step.parameters.durationS, services.periodS)) {
        if (average.isValid) services.setResult(step.id, 'objective', average.mean);
        return done;
      }
      average.add(input.objective);
      heldS += input.dtS;
      return null;
    },
  };
}

/** Judges its criterion in one scan. What rests on a bad input is neither met nor not met. */
export function createCheckRunner(
  step: StepOf<'check'>,
  services: StepServices,
  compile: CompileStepExpression,
): StepRunner {
  const { criterion } = step.parameters;
  const expression = compile(step.id, 'parameters.criterion', criterion);
  return {
    id: step.id,
    kind: step.kind,
    signalNames: [],
    signals: noSignals,
    begin: () => null,
    step() {
      const value = expression.evaluate(services.lookup);
      const isMet = Number.isNaN(value) ? null : value !== 0;
      services.decide(isMet);
      services.emit({ type: 'check.decided', step: step.id, criterion, isMet });
      const reason = isMet === null ? 'Something that the criterion needs has no good value.' : '';
      return { port: isMet === true ? 'yes' : 'no', reason };
    },
  };
}
