/**
 * Lags of first and second order with the exact answer to an input that is held during the step (zero-order
 * hold): no error at any step length.
 *
 * @source K. J. Åström and B. Wittenmark (1997), "Computer-Controlled Systems", section 2.3
 */
export interface FirstOrderLagState {
  output: number;
}

/** @param at output in the beginning */
export function createFirstOrderLag(at = 0): FirstOrderLagState {
  return { output: at };
}

/**
 * One step of τ·y' + y = u.
 *
 * @param held input during the step; where it is no finite number nothing changes
 * @param timeConstantS τ, s; above 0
 * @param dtS time of the step, s; 0 or above
 * @returns the output at the end of the step
 * @realtime safe: allocates nothing
 */
export function stepFirstOrderLag(
  state: FirstOrderLagState,
  held: number,
  timeConstantS: number,
  dtS: number,
): number {
  if (Number.isFinite(held)) state.output -= Math.expm1(-dtS / timeConstantS) * (held - state.output);
  return state.output;
}

export interface SecondOrderLagState {
  output: number;
  /** Derivative of the output, unit per second. */
  rate: number;
}

/** @param at output in the beginning, at rest */
export function createSecondOrderLag(at = 0): SecondOrderLagState {
  return { output: at, rate: 0 };
}

/**
 * One step of y'' + 2ζω·y' + ω²·y = ω²·u.
 *
 * @param held input during the step; where it is no finite number nothing changes
 * @param naturalRadPerS ω, rad/s; above 0
 * @param damping ζ; 0 or above (1 is critical)
 * @param dtS time of the step, s; 0 or above
 * @returns the output at the end of the step
 * @realtime safe: allocates nothing
 */
export function stepSecondOrderLag(
  state: SecondOrderLagState,
  held: number,
  naturalRadPerS: number,
  damping: number,
  dtS: number,
): number {
  if (!Number.isFinite(held)) return state.output;
  const decay = damping * naturalRadPerS;
  const split = naturalRadPerS * Math.sqrt(Math.abs(1 - damping * damping));
  const even = evenPart(decay, split, damping, dtS);
  const odd = oddPart(decay, split, damping, dtS);
  const distance = state.output - held;
  state.output = held + (even + decay * odd) * distance + odd * state.rate;
  state.rate = (even - decay * odd) * state.rate - naturalRadPerS * naturalRadPerS * odd * distance;
  return state.output;
}

/** e^(−decay·t)·cos(split·t), or cosh above critical damping. */
function evenPart(decay: number, split: number, damping: number, dtS: number): number {
  if (damping <= 1) return Math.exp(-decay * dtS) * Math.cos(split * dtS);
  return (Math.exp((split - decay) * dtS) + Math.exp((-split - decay) * dtS)) / 2;
}

/** e^(−decay·t)·sin(split·t)/split, its limit t where split is 0, or sinh above critical damping. */
function oddPart(decay: number, split: number, damping: number, dtS: number): number {
  if (split * dtS < 1e-9) return Math.exp(-decay * dtS) * dtS;
  if (damping <= 1) return (Math.exp(-decay * dtS) * Math.sin(split * dtS)) / split;
  return (Math.exp((split - decay) * dtS) - Math.exp((-split - decay) * dtS)) / (2 * split);
}
