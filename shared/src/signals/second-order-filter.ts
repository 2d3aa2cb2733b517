import { checkSettings } from './check-settings.js';

/** *low-pass*, *high-pass*; *band-pass* with gain 1 at its centre; *notch* with gain 0 there. */
export const secondOrderKinds = ['low-pass', 'high-pass', 'band-pass', 'notch'] as const;
export type SecondOrderKind = (typeof secondOrderKinds)[number];

export interface SecondOrderSettings {
  kind: SecondOrderKind;
  /** Natural frequency (corner or centre), Hz; above 0, below half the step rate. */
  frequencyHz: number;
  /** Quality ω₀/bandwidth = 1/(2ζ), above 0; 1/√2 (Butterworth) for the flattest low-pass. */
  quality: number;
  /** Time of a step, s; above 0. */
  periodS: number;
}

export interface SecondOrderFilterState {
  readonly b: readonly [number, number, number];
  readonly a: readonly [number, number];
  first: number;
  second: number;
  /** False before the first input, for whose steady state the filter then begins. */
  isBegun: boolean;
}

/** Numerators in s/ω₀, powers 2, 1, 0; the denominator is 1, 1/Q, 1. */
const numerators: Record<SecondOrderKind, (quality: number) => readonly [number, number, number]> = {
  'low-pass': () => [0, 0, 1],
  'high-pass': () => [1, 0, 0],
  'band-pass': (quality) => [0, 1 / quality, 0],
  notch: () => [1, 0, 1],
};

/**
 * Second-order filter N(s)/(s² + s·ω₀/Q + ω₀²), discretised by the bilinear rule with pre-warping at ω₀: exact in
 * gain and phase at 0, at ω₀ and, for the low-pass and high-pass, in their limits.
 *
 * @throws analysis.invalid-input
 * @source A. V. Oppenheim and R. W. Schafer (1989), "Discrete-Time Signal Processing", section 7.1.2
 */
export function createSecondOrderFilter(settings: SecondOrderSettings): SecondOrderFilterState {
  const { kind, frequencyHz, quality, periodS } = settings;
  checkSettings(
    [periodS > 0, 'periodS', 'must be above 0.'],
    [
      frequencyHz > 0 && frequencyHz * periodS < 0.5,
      'frequencyHz',
      'must be above 0 and below half the step rate.',
    ],
    [quality > 0 && Number.isFinite(quality), 'quality', 'must be above 0.'],
  );
  const k = Math.tan(Math.PI * frequencyHz * periodS);
  const [n2, n1, n0] = numerators[kind](quality);
  const scale = 1 + k / quality + k * k;
  return {
    b: [
      (n2 + n1 * k + n0 * k * k) / scale,
      (2 * (n0 * k * k - n2)) / scale,
      (n2 - n1 * k + n0 * k * k) / scale,
    ],
    a: [(2 * (k * k - 1)) / scale, (1 - k / quality + k * k) / scale],
    first: 0,
    second: 0,
    isBegun: false,
  };
}

/**
 * One step.
 *
 * @returns the output in the input's unit; NaN where the input is no finite number, which leaves the state as
 * it was
 * @realtime safe: allocates nothing
 */
export function stepSecondOrderFilter(state: SecondOrderFilterState, input: number): number {
  if (!Number.isFinite(input)) return NaN;
  const [b0, b1, b2] = state.b;
  const [a1, a2] = state.a;
  if (!state.isBegun) {
    const steady = (input * (b0 + b1 + b2)) / (1 + a1 + a2);
    state.first = steady - b0 * input;
    state.second = b2 * input - a2 * steady;
    state.isBegun = true;
  }
  // Transposed direct form II: two numbers of state, no difference of large ones.
  const output = b0 * input + state.first;
  state.first = b1 * input - a1 * output + state.second;
  state.second = b2 * input - a2 * output;
  return output;
}

/** Puts a filter back to where it was before its first input. */
export function resetSecondOrderFilter(state: SecondOrderFilterState): void {
  state.isBegun = false;
}
