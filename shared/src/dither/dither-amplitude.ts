import { DomainError } from '../errors/domain-error.js';

/** What bounds the amplitude of a dither; everything in actuator and objective units. */
export interface AmplitudeBounds {
  /** Step of the actuator's wire or drive, actuator unit; 0 where it is continuous. */
  resolution: number;
  /** Standard deviation of the objective from scan to scan, objective unit. */
  noise: number;
  /** Scans over which one slope is averaged. */
  scansAveraged: number;
  /** Least slope that is to stand out of the noise, objective unit / actuator unit. */
  slopeToSee: number;
  /** Greatest amplitude of the envelope, actuator unit. */
  amplitudeMax: number;
  /** Greatest speed of the envelope, actuator unit / s, and the period of the dither, s. */
  slewPerS: number;
  periodS: number;
  /** Size of the second derivative at the best point, objective unit / actuator unit². */
  curvature: number;
  /** Loss by the dither that is allowed, objective unit. */
  lossAllowed: number;
}

/** Steps of the actuator in an amplitude: with fewer the sine is a stair whose harmonics are no longer small. */
const stepsMin = 4;

export type AmplitudeBound = 'resolution' | 'noise' | 'envelope' | 'slew' | 'loss';

export interface SizedAmplitude {
  amplitude: number;
  /** What keeps it from being larger. */
  limitedBy: AmplitudeBound;
  /** How many times the least amplitude it is; 1 is just enough. */
  margin: number;
}

/**
 * The largest amplitude that is allowed: at most that of the envelope, a·2π/T within its slew limit, and a loss
 * f''a²/4 within what is allowed; at least four steps of the actuator, and enough for the least-squares slope over
 * N scans, whose standard deviation is σ·√(2/N)/a, to be no more than the slope to be seen.
 *
 * @throws analysis.invalid-input where the largest is less than the least, naming both bounds and what to do
 * @source loss: M. Krstić and H.-H. Wang (2000), Automatica 36:595–601 (from memory), and a direct mean; slope: least
 * squares over whole periods; four steps: chosen here
 * @example
 * sizeAmplitude({ resolution: 0.1, noise: 0, scansAveraged: 100, slopeToSee: 1, amplitudeMax: 2, slewPerS: 100, periodS: 5, curvature: 0.04, lossAllowed: 0.01 }) // { amplitude: 1, limitedBy: 'loss', margin: 2.5 }
 */
export function sizeAmplitude(bounds: AmplitudeBounds): SizedAmplitude {
  const { resolution, noise, scansAveraged, slopeToSee, amplitudeMax, slewPerS, periodS } = bounds;
  const most = extreme(
    [
      { by: 'envelope', amplitude: amplitudeMax },
      { by: 'slew', amplitude: (slewPerS * periodS) / (2 * Math.PI) },
      { by: 'loss', amplitude: 2 * Math.sqrt(bounds.lossAllowed / bounds.curvature) },
    ],
    -1,
  );
  const least = extreme(
    [
      { by: 'resolution', amplitude: stepsMin * resolution },
      { by: 'noise', amplitude: (noise * Math.sqrt(2 / scansAveraged)) / slopeToSee },
    ],
    1,
  );
  if (!(most.amplitude >= least.amplitude) || !(most.amplitude > 0)) {
    const message = `The dither amplitude must be at least ${short(least.amplitude)} (${why[least.by]}) and at most ${short(most.amplitude)} (${why[most.by]}): ${remedies[most.by]}, or ${remedies[least.by]}.`;
    throw new DomainError('analysis.invalid-input', message, [{ field: 'amplitude', message }]);
  }
  return { amplitude: most.amplitude, limitedBy: most.by, margin: most.amplitude / least.amplitude };
}

interface Candidate {
  by: AmplitudeBound;
  amplitude: number;
}

function extreme(candidates: readonly [Candidate, ...Candidate[]], sign: 1 | -1): Candidate {
  return candidates.reduce((a, b) => (sign * (b.amplitude - a.amplitude) > 0 ? b : a));
}

const short = (value: number) => Number(value.toPrecision(4));

const why: Record<AmplitudeBound, string> = {
  resolution: `${stepsMin} steps of the actuator`,
  noise: 'to stand out of the noise',
  envelope: 'the envelope',
  slew: 'the slew limit at this period',
  loss: 'the loss that is allowed',
};

const remedies: Record<AmplitudeBound, string> = {
  resolution: 'use an actuator with finer steps',
  noise: 'average over more scans or quieten the objective',
  envelope: 'have a larger dither approved',
  slew: 'make the period longer',
  loss: 'allow more loss',
};
