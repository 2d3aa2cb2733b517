import type { Sequencer, SequencerContext, SequencerInput, SequencerOutput } from './sequencer.types.js';
import { RunLedger } from './run-ledger.js';
import { channelSymbols } from '../expressions/channel-symbols.js';
import { objectiveSymbol } from './expression-symbols.js';
import { resultNames } from './step-kinds.js';
import { orderSteps, type StepOrder } from './step-order.js';
import { stepCompiler } from './steps/compile-step-expression.js';
import { createStepRunner } from './steps/create-step-runner.js';
import type { StepExit, StepRunner } from './steps/step-runner.js';
import { verdictOf, verdictReason } from './verdict.js';

/**
 * Makes the runner of one experiment. Preflight should have passed: what it would have refused ends the run
 * as inconclusive. Steps that take no time follow each other within one scan.
 *
 * @throws expression.invalid naming step and field, where an expression does not compile
 */
export function createSequencer(context: SequencerContext): Sequencer {
  return new GraphSequencer(context);
}

class GraphSequencer implements Sequencer {
  readonly signalNames: readonly string[];
  readonly signals: Float64Array;
  private readonly order: StepOrder;
  private readonly ledger: RunLedger;
  private readonly runners: ReadonlyMap<string, StepRunner>;
  private readonly offsets = new Map<string, number>();
  private current: StepRunner | null = null;
  /** Why the present step could not begin. */
  private refusal: StepExit | null = null;

  constructor(context: SequencerContext) {
    this.order = orderSteps(context.graph);
    this.ledger = new RunLedger(context);
    const steps = [...this.order.steps.values()];
    const known = channelSymbols(context.rig).with([objectiveSymbol, ...steps.flatMap(resultNames)]);
    const compile = stepCompiler(known);
    this.runners = new Map(steps.map((step) => [step.id, createStepRunner(step, this.ledger, compile)]));
    const names: string[] = [];
    for (const runner of this.runners.values()) {
      this.offsets.set(runner.id, names.length);
      names.push(...runner.signalNames.map((name) => `${runner.id}.${name}`));
    }
    this.signalNames = names;
    this.signals = new Float64Array(names.length).fill(NaN);
  }

  get results(): ReadonlyMap<string, number> {
    return this.ledger.results;
  }

  step(input: SequencerInput): SequencerOutput {
    const { ledger } = this;
    ledger.beginScan(input);
    this.signals.fill(NaN);
    if (!ledger.output.end) this.run(input);
    return ledger.output;
  }

  /** Goes through the steps until one takes time; each at most once in a scan. */
  private run(input: SequencerInput): void {
    let isOn = this.current !== null || this.enter(this.order.start?.id, input);
    for (let passed = 0; isOn && passed <= this.runners.size; passed += 1) {
      const runner = this.current as StepRunner;
      const exit = this.refusal ?? runner.step(input);
      this.signals.set(runner.signals, this.offsets.get(runner.id) ?? 0);
      if (!exit) return;
      isOn = this.leave(runner, exit, input);
    }
    if (isOn) this.ledger.end('inconclusive', 'The steps lead back to themselves without taking time.');
  }

  /** @returns false where the run ended instead */
  private enter(stepId: string | undefined, input: SequencerInput): boolean {
    const runner = stepId === undefined ? undefined : this.runners.get(stepId);
    if (!runner) {
      this.ledger.end('inconclusive', 'The experiment has no Start.');
      return false;
    }
    this.current = runner;
    this.ledger.beginStep(runner);
    if (runner.kind === 'finish') {
      this.ledger.end(verdictOf(this.ledger.decisions), verdictReason(this.ledger.decisions));
      return false;
    }
    this.refusal = runner.begin(input);
    return true;
  }

  /** @returns false where the run ended with this step */
  private leave(runner: StepRunner, exit: StepExit, input: SequencerInput): boolean {
    this.ledger.endStep(runner, exit);
    const next = exit.port === null ? undefined : this.order.next(runner.id, exit.port);
    if (next !== undefined) return this.enter(next, input);
    const how = exit.port === null ? 'could not be done' : `left by "${exit.port}", which leads nowhere`;
    this.ledger.end('inconclusive', `Step "${runner.id}" ${how}${exit.reason ? `: ${exit.reason}` : '.'}`);
    return false;
  }
}
