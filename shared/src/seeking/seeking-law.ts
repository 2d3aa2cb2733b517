/** What a seeking law is told in one scan. */
export interface SeekingInput {
  /** Objective as it is to be made large or small; used only where `isValid`. */
  objective: number;
  /** Good and inside the objective's validity conditions. */
  isValid: boolean;
}

/** What a seeking law asks for: applied value = estimate + dither. */
export interface SeekingOutput {
  /** Best-known point, actuator unit. */
  estimate: number;
  /** Signed dither of this scan, actuator unit. */
  dither: number;
}

/**
 * A seeking law: a small object with explicit state. `step` mutates and returns through the state it
 * was given, so that a scan allocates nothing.
 */
export interface SeekingLaw<Parameters, State extends SeekingState> {
  readonly id: string;
  /** Names of the inner signals, in the order of `state.signals`. */
  readonly signalNames: readonly string[];
  /** @param start where the estimate begins, actuator unit */
  init(parameters: Parameters, start: number): State;
  /** @param dtS time since the last step, s; above zero */
  step(state: State, input: SeekingInput, dtS: number): SeekingOutput;
}

export interface SeekingState {
  estimate: number;
  /** Inner signals of the last step; NaN where not defined. */
  readonly signals: Float64Array;
}
