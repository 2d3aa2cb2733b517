import type { ActuatorLimit } from '../../envelopes/envelope.schema.js';
import type { GradientLawParameters } from '../../seeking/gradient-law.js';
import type { StepOf } from '../experiment.schema.js';

/** Share of an actuator's range below which a dither is rounding. */
const amplitudeShareMin = 1e-9;

/** Parameters of Seek that may come from expressions, as numbers. */
export interface SeekNumbers {
  amplitude: number;
  periodS: number;
  gain: number;
}

/**
 * Parameters of the law: the box is the step's, narrowed so that estimate and dither together stay within
 * the envelope.
 *
 * @returns the parameters, or why there is nothing to seek with
 */
export function setUpSeek(
  step: StepOf<'seek'>,
  numbers: SeekNumbers,
  limit: ActuatorLimit | undefined,
): GradientLawParameters | string {
  const { actuator, washoutRatio, lowPassRatio, phaseDeg, min, max } = step.parameters;
  const { amplitude, periodS, gain } = numbers;
  if (!limit) return `"${actuator}" has no limit in the envelope in force.`;
  for (const [name, value] of Object.entries({
    'dither amplitude': amplitude,
    'dither period': periodS,
    gain,
  })) {
    if (!Number.isFinite(value) || value <= 0)
      return `The ${name} must be a number above zero, not ${value}.`;
  }
  if (amplitude < (limit.max - limit.min) * amplitudeShareMin) {
    return `The dither amplitude ${amplitude} is too small for "${actuator}" to show.`;
  }
  if (amplitude > limit.ditherAmplitudeMax) {
    return `The dither amplitude ${amplitude} is above the ${limit.ditherAmplitudeMax} of the envelope.`;
  }
  const low = Math.max(min ?? -Infinity, limit.min + amplitude);
  const high = Math.min(max ?? Infinity, limit.max - amplitude);
  if (low > high) return 'With the dither kept inside the envelope no room is left to seek in.';
  return {
    axes: [
      {
        // The law keeps the estimate off its box by the amplitude.
        min: Math.max(low - amplitude, limit.min),
        max: Math.min(high + amplitude, limit.max),
        amplitude,
        periodS,
        phaseRad: (phaseDeg * Math.PI) / 180,
        dither: 'sine',
        gain,
        speedMax: null,
      },
    ],
    washoutRatio,
    lowPassRatio,
    taper: null,
  };
}
