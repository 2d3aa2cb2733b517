import type { EnvelopeContent } from '../envelopes/envelope.schema.js';
import type { ObjectiveContent } from '../objectives/objective.schema.js';
import type { Rig } from '../rigs/rig.schema.js';
import type { RunEventBody, Verdict } from '../runs/run-event.schema.js';
import type { Readings } from '../scan/readings.js';
import type { ValueGrid } from '../scan/scan-engine.types.js';
import type { ExperimentGraph } from './experiment.schema.js';

/** What a step wants of one actuator in this scan; the guard has the last word. */
export interface ActuatorRequest {
  channel: string;
  /** Wanted value without dither, channel unit. */
  base: number;
  /** Signed dither of this scan, channel unit; 0 where none. */
  dither: number;
}

/** The objective in one scan. `value` is a number only where `isGood`. */
export interface ObjectiveSample {
  value: number;
  /** All inputs good and the result finite. */
  isGood: boolean;
  /** Good, and every validity condition true. */
  isValid: boolean;
  /** Why it is not valid, in words: the message of the first condition that is not true; null where valid. */
  whyInvalid?: string | null;
}

export interface SequencerContext {
  rig: Rig;
  envelope: EnvelopeContent;
  objective: ObjectiveContent | null;
  graph: ExperimentGraph;
  /** Nominal time between two scans, s. */
  periodS: number;
  /** Grid of each actuator's wire, where known: how near to its target an actuator can come. */
  grids?: ReadonlyMap<string, ValueGrid>;
}

export interface SequencerInput {
  /** Time since the run began, without pauses, s. */
  tS: number;
  /** Time since the last step of the sequencer, s; above zero. */
  dtS: number;
  readings: Readings;
  objective: ObjectiveSample;
  /** Value last applied by the guard for an actuator, channel unit (dither included). */
  applied: (channel: string) => number;
  /** Base last held for an actuator, channel unit (dither excluded). */
  held: (channel: string) => number;
}

/** Its lists and requests are reused by the next step: copy what is to be kept. Events are fresh. */
export interface SequencerOutput {
  /** One per actuator that a step commands; the others hold their base. */
  requests: readonly ActuatorRequest[];
  events: readonly RunEventBody[];
  activeSteps: readonly string[];
  /** Set from the scan on in which the run came to its end. */
  end: { verdict: Verdict; reason: string } | null;
}

/** The pure runner of one experiment: stepped once a scan, never looks at a clock. */
export interface Sequencer {
  /** Columns `<step>.<signal>` that this experiment records beside the channels. */
  readonly signalNames: readonly string[];
  /** Values of `signalNames` after the last step; NaN where a signal is not active. */
  readonly signals: Float64Array;
  /** Results so far by name, e.g. `survey.best.airTrim`. */
  readonly results: ReadonlyMap<string, number>;
  step(input: SequencerInput): SequencerOutput;
}
