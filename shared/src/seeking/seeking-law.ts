import type { z } from 'zod';

/** How a law perturbs: injected sine or square, or the plant's own ripple with nothing injected. */
export const ditherKinds = ['sine', 'square', 'measured'] as const;
export type DitherKind = (typeof ditherKinds)[number];

/** What a seeking law is told in one scan. */
export interface SeekingInput {
  /** Objective, to be made large (feed the negative of what is to be made small); used only where `isValid`. */
  objective: number;
  /** Good and inside the objective's validity conditions. */
  isValid: boolean;
  /** Actuators as measured in the scan of `objective`, actuator units; needed for the dither `measured`. */
  measured?: ArrayLike<number>;
  /** Quantity that a constrained law keeps on the allowed side of `bound`, and that bound, in its unit. */
  constraint?: number;
  bound?: number;
}

/**
 * What every law keeps. A law asks for `estimate + dither` per actuator, which never leaves the box of its
 * parameters; no entry of `estimate` or `dither` is ever NaN.
 */
export interface SeekingState {
  /** Best-known point, actuator units. */
  readonly estimate: Float64Array;
  /** Signed dither of this scan, actuator units. */
  readonly dither: Float64Array;
  /** Inner signals of the last step in the order of `signalNames`; NaN where not defined. */
  readonly signals: Float64Array;
  /** Box of the estimate: that of the parameters less the dither, actuator units. */
  readonly lowest: Float64Array;
  readonly highest: Float64Array;
  /** Where a retreat goes: the newest estimate that saw a whole valid dither period since, actuator units. */
  readonly lastGood: Float64Array;
  /** True while the objective is not valid and the law waits at `lastGood`. */
  isRetreated: boolean;
  /** Time until the law adapts: its filters settle after a start or a retreat, s; zero or below while it adapts. */
  settleS: number;
}

/**
 * A seeking law: a small object with explicit state. It always climbs. `step` mutates the state that it was
 * given and allocates nothing. The objective given to a step is taken as the answer to the dither of the step
 * before.
 */
export interface SeekingLaw<Parameters extends object, State extends SeekingState> {
  readonly id: string;
  readonly title: string;
  /** One line for the palette. */
  readonly purpose: string;
  /** Author, year, title, place of publication. */
  readonly source: string;
  /** How many actuators it can steer at once. */
  readonly actuatorsMax: number;
  readonly ditherKinds: readonly DitherKind[];
  /** What `init` takes; titles, units, ranges and help stand in the metadata of its fields. */
  readonly parametersSchema: z.ZodType<Parameters>;
  /** @returns names of the inner signals for so many actuators, in the order of `state.signals` */
  signalNames(actuators: number): string[];
  /** @param start where the estimate begins, actuator units; is held in the box */
  init(parameters: Parameters, start: ArrayLike<number>): State;
  /** @param dtS time since the last step, s; a step that is not above zero is taken as one without objective */
  step(state: State, input: SeekingInput, dtS: number): void;
}
