import type { ActuatorLimit } from '../../envelopes/envelope.schema.js';
import type { Lookup } from '../../expressions/expression.types.js';
import type { RunEventBody } from '../../runs/run-event.schema.js';
import type { ObjectiveContent } from '../../objectives/objective.schema.js';
import type { SequencerInput } from '../sequencer.types.js';

/** How a step ended. */
export interface StepExit {
  /** The port that it leaves by; null where the run cannot go on. */
  port: string | null;
  /** Why, in words; empty where the port says it all. */
  reason: string;
}

/** What the sequencer does for a step. */
export interface StepServices {
  /** Nominal time between two scans, s. */
  readonly periodS: number;
  readonly objective: ObjectiveContent | null;
  /** Limit of an actuator; undefined where the envelope has none. */
  limitOf(channel: string): ActuatorLimit | undefined;
  /** Step of the grid of an actuator's wire, channel unit; 0 where it is continuous or not known. */
  gridStepOf(channel: string): number;
  /** The value nearest to `target` that an actuator can be sent to: on its wire's grid, inside its envelope. */
  nearestTo(channel: string, target: number): number;
  /** How much further off than that value an actuator may be and still have arrived, channel unit. */
  toleranceOf(channel: string): number;
  /** Value of a symbol in this scan: a result, the objective where it is valid, or a good reading; else NaN. */
  readonly lookup: Lookup;
  /** Asks for an actuator value in this scan; a later request for the same actuator replaces an earlier one. */
  request(channel: string, base: number, dither: number): void;
  emit(event: RunEventBody): void;
  /** Leaves a result `<step>.<suffix>` behind; a value that is not finite is not recorded. */
  setResult(stepId: string, suffix: string, value: number): void;
  /** A check has decided; null where it could not. */
  decide(isMet: boolean | null): void;
}

/**
 * One step at work: a small object with explicit state, stepped once a scan while it is active. It reads
 * no clock; time is what its input says. After `begin` it may be stepped at once.
 */
export interface StepRunner {
  readonly id: string;
  readonly kind: string;
  /** Inner signals that are recorded, and their values after the last step; NaN where not defined. */
  readonly signalNames: readonly string[];
  readonly signals: Float64Array;
  /** Starts anew. @returns an exit where the step cannot be done at all */
  begin(input: SequencerInput): StepExit | null;
  /** @returns null while the step goes on */
  step(input: SequencerInput): StepExit | null;
}

export const noSignals = new Float64Array(0);

export const done: StepExit = { port: 'done', reason: '' };

/**
 * Whether a time is over, to the nearest scan: a clock that ticks a little early does not add a scan.
 *
 * @param elapsedS time that has passed, s
 */
export function isOver(elapsedS: number, durationS: number, periodS: number): boolean {
  return elapsedS + periodS / 2 >= durationS;
}
