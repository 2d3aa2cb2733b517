/**
 * The generator's own protection: above a reflected power it folds its forward power back, above a higher one
 * it trips and stays off. All in bench time.
 */
export const generator = {
  /** Forward power asked for, W. */
  setW: 1000,
  /** Reflected power that folding back holds, W. */
  foldbackW: 200,
  /** How quickly the forward power follows, s: time constant of ramp and folding back. */
  timeConstantS: 0.5,
  /** Reflected power that trips, W, and for how long it may last, s. */
  tripW: 300,
  tripAfterS: 0.3,
} as const;

export interface GeneratorState {
  /** Forward power, W. */
  readonly forwardW: number;
  /** Latched by too much reflected power. */
  readonly isTripped: boolean;
  /** How long the reflected power has been too high, s. */
  readonly overS: number;
}

export const generatorOff: GeneratorState = { forwardW: 0, isTripped: false, overS: 0 };

/** Forward power that the generator goes to, W. @param share reflected share, 0 to 1 */
export function forwardGoal(share: number): number {
  return Math.min(generator.setW, generator.foldbackW / Math.max(share, 1e-12));
}

/** @param isAllowed whether the controller lets it run; without that it is off at once */
export function stepGenerator(
  state: GeneratorState,
  share: number,
  isAllowed: boolean,
  dtS: number,
): GeneratorState {
  if (!isAllowed || state.isTripped) return { ...generatorOff, isTripped: state.isTripped };
  const follow = 1 - Math.exp(-dtS / generator.timeConstantS);
  const forwardW = state.forwardW + follow * (forwardGoal(share) - state.forwardW);
  const overS = forwardW * share > generator.tripW ? state.overS + dtS : 0;
  if (overS > generator.tripAfterS) return { ...generatorOff, isTripped: true };
  return { forwardW, isTripped: false, overS };
}
