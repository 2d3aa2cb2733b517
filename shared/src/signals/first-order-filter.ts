/**
 * First-order filters discretised by the bilinear (Tustin) rule, stable for every step length; the step
 * may vary from scan to scan. Phase and gain agree with the continuous filter to second order in
 * (corner · dtS), see e.g. Franklin, Powell and Workman, "Digital Control of Dynamic Systems" (1998), ch. 6.
 */
export interface FirstOrderFilterState {
  /** Output of the low-pass. */
  low: number;
  /** Input of the step before; NaN before the first. */
  lastInput: number;
}

/** @returns a filter that takes its first input for its steady state */
export function createFirstOrderFilter(): FirstOrderFilterState {
  return { low: NaN, lastInput: NaN };
}

/** Puts a filter back to where it was before its first input, or at rest on a given value. */
export function resetFirstOrderFilter(state: FirstOrderFilterState, at = NaN): void {
  state.low = at;
  state.lastInput = at;
}

/**
 * Corner to give to the steps below so that gain and phase are exactly those of the continuous filter at one
 * frequency, which the bilinear rule alone shifts.
 *
 * @param cornerRadPerS wanted corner, rad/s; below π/dtS
 * @param dtS time of a step, s
 * @returns (2/dtS)·tan(cornerRadPerS·dtS/2), rad/s: with it the filter is exact at its corner
 * @source Franklin, Powell and Workman (1998), section 6.1.2, "prewarping"
 */
export function prewarpedCornerRadPerS(cornerRadPerS: number, dtS: number): number {
  return (2 / dtS) * Math.tan((cornerRadPerS * dtS) / 2);
}

/**
 * One step of the low-pass ω/(s+ω).
 *
 * @param cornerRadPerS corner frequency ω, rad/s; zero or above; see `prewarpedCornerRadPerS`
 * @param dtS time since the step before, s; above zero
 * @returns the low-pass output, in the input's unit; NaN where the input is no finite number, which leaves the
 * state as it was
 * @realtime safe: allocates nothing
 */
export function stepLowPass(
  state: FirstOrderFilterState,
  input: number,
  cornerRadPerS: number,
  dtS: number,
): number {
  if (!Number.isFinite(input)) return NaN;
  if (Number.isNaN(state.lastInput)) {
    state.low = input;
  } else {
    const half = (cornerRadPerS * dtS) / 2;
    state.low = ((1 - half) * state.low + half * (input + state.lastInput)) / (1 + half);
  }
  state.lastInput = input;
  return state.low;
}

/**
 * One step of the washout (high-pass) s/(s+ω): what the low-pass leaves over.
 *
 * @returns the input without its slow part; 0 in the first step
 * @realtime safe: allocates nothing
 */
export function stepWashout(
  state: FirstOrderFilterState,
  input: number,
  cornerRadPerS: number,
  dtS: number,
): number {
  return input - stepLowPass(state, input, cornerRadPerS, dtS);
}
