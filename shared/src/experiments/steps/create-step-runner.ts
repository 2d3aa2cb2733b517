import type { Step } from '../experiment.schema.js';
import type { CompileStepExpression } from './compile-step-expression.js';
import { createMoveRunner } from './move-runner.js';
import { SeekRunner } from './seek-runner.js';
import { createSettleRunner } from './settle-runner.js';
import { createCheckRunner, createHoldRunner, createPassingRunner } from './simple-runners.js';
import type { StepRunner, StepServices } from './step-runner.js';
import { SurveyRunner } from './survey-runner.js';

/** @throws expression.invalid where an expression of the step does not compile */
export function createStepRunner(
  step: Step,
  services: StepServices,
  compile: CompileStepExpression,
): StepRunner {
  switch (step.kind) {
    case 'start':
    case 'finish':
      return createPassingRunner(step);
    case 'move':
      return createMoveRunner(step, services, compile);
    case 'settle':
      return createSettleRunner(step, services);
    case 'hold':
      return createHoldRunner(step, services);
    case 'survey':
      return new SurveyRunner(step, services, compile);
    case 'seek':
      return new SeekRunner(step, services, compile);
    case 'check':
      return createCheckRunner(step, services, compile);
  }
}
