import { DomainError } from '../errors/domain-error.js';
import type {
  ObjectiveSample,
  Sequencer,
  SequencerInput,
  SequencerOutput,
} from '../experiments/sequencer.types.js';
import type { RunOrder } from '../live/host-message.schema.js';
import { compileObjective, type ObjectiveEvaluator } from '../objectives/objective-evaluator.js';
import type { Rig } from '../rigs/rig.schema.js';
import { type RunColumn, runColumns } from '../runs/run-columns.js';
import type { RunStatus, Verdict } from '../runs/run-event.schema.js';
import type { HeldActuator } from './actuator-bank.js';
import type { Readings } from './readings.js';

/** How a run is to end once the rig is at rest. */
export interface RunEnd {
  status: RunStatus;
  verdict: Verdict;
  reason: string;
}

const noObjective: Readonly<ObjectiveSample> = {
  value: NaN,
  isGood: false,
  isValid: false,
  whyInvalid: 'The experiment has no objective.',
};

/** One run while it is open: its clock, its sequencer, its row. */
export class RunKeeper {
  readonly columns: readonly RunColumn[];
  readonly row: Float64Array;
  isPaused = false;
  /** Set once the run is to end; the rig goes to rest meanwhile. */
  end: RunEnd | null = null;
  /** Until when a tripped run stays open for its stop action, s; NaN before the first scan of it. */
  stopAwaitedUntilS = NaN;
  activeSteps: readonly string[] = [];
  /** The objective of this scan. */
  objective: Readonly<ObjectiveSample> = noObjective;
  private readonly evaluator: ObjectiveEvaluator | null;
  private readonly input: SequencerInput;
  private startTS = NaN;
  private isStepped = false;

  /** @throws expression.invalid where the objective cannot be understood */
  constructor(
    readonly order: RunOrder,
    readonly sequencer: Sequencer,
    private readonly rig: Rig,
    private readonly readings: Readings,
    private readonly actuators: readonly HeldActuator[],
  ) {
    this.evaluator = evaluatorOf(order, rig);
    this.columns = runColumns(rig, order.objective?.unit ?? '', sequencer.signalNames);
    this.row = new Float64Array(this.columns.length).fill(NaN);
    const find = (channel: string) => actuators.find((actuator) => actuator.channel === channel);
    this.input = {
      tS: 0,
      dtS: 0,
      readings,
      objective: noObjective,
      applied: (channel) => find(channel)?.guarded.applied ?? NaN,
      held: (channel) => find(channel)?.base ?? NaN,
    };
  }

  /** Time since the run's first scan, s, pauses included. */
  runTS(tS: number): number {
    if (Number.isNaN(this.startTS)) this.startTS = tS;
    return tS - this.startTS;
  }

  evaluateObjective(): void {
    this.objective = this.evaluator?.evaluate(this.readings) ?? noObjective;
  }

  /** Steps the sequencer; its time stands still in pauses and begins at 0. */
  step(dtS: number): SequencerOutput {
    if (this.isStepped) this.input.tS += dtS;
    this.isStepped = true;
    this.input.dtS = dtS;
    this.input.objective = this.objective;
    return this.sequencer.step(this.input);
  }

  /** Fills the row of this scan in the order of `columns`. */
  fillRow(): Float64Array {
    let at = 0;
    const { channels } = this.rig;
    for (let i = 0; i < channels.length; i++) {
      if (channels[i]?.kind !== 'trace') this.row[at++] = this.readings.goodValue(i);
    }
    for (const channel of channels) {
      if (channel.kind !== 'actuator') continue;
      const actuator = this.findWritten(channel.id);
      this.row[at++] = actuator ? actuator.requested : NaN;
      this.row[at++] = actuator ? actuator.guarded.applied : NaN;
    }
    this.row[at++] = this.objective.isGood ? this.objective.value : NaN;
    const isSeeking = this.end === null;
    const { signals } = this.sequencer;
    for (let i = 0; i < signals.length; i++) this.row[at++] = isSeeking ? (signals[i] ?? NaN) : NaN;
    return this.row;
  }

  results(): Record<string, number> {
    return Object.fromEntries(this.sequencer.results);
  }

  private findWritten(channel: string): HeldActuator | null {
    for (const actuator of this.actuators) {
      if (actuator.channel === channel) return actuator.isWritten ? actuator : null;
    }
    return null;
  }
}

function evaluatorOf(order: RunOrder, rig: Rig): ObjectiveEvaluator | null {
  if (!order.objective) return null;
  const outcome = compileObjective(order.objective, rig);
  if (outcome.isOk) return outcome.objective;
  const details = outcome.faults.map(({ field, message }) => ({ field: `objective.${field}`, message }));
  throw new DomainError('expression.invalid', undefined, details);
}
