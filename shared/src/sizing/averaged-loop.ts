import { complex, lagOf, sampledAnswer, sizeOf, times, type PlantDynamics } from './plant-answer.js';

/** The gradient law around a quadratic, as far as its averaged motion goes. */
export interface AveragedLoop {
  plant: PlantDynamics;
  scanS: number;
  omegaRadPerS: number;
  washoutRadPerS: number;
  lowPassRadPerS: number;
  phaseRad: number;
  /** Gain times size of the second derivative, 1/s. */
  loopRate: number;
}

/** Share of the slope that demodulation recovers: Re[e^{jφ}F(jω)H(jω)] (Krstić & Wang 2000). */
export function recoveredSlope(loop: AveragedLoop): number {
  return sideband(loop, 0);
}

/** Lag of plant and washout at the dither frequency, which the demodulation has to make up for, rad. */
export function lagAtDither(loop: Omit<AveragedLoop, 'phaseRad' | 'loopRate'>): number {
  const answer = sampledAnswer(loop.plant, loop.washoutRadPerS, loop.scanS, complex(0, loop.omegaRadPerS));
  return lagOf(answer);
}

/** Size of the answer of the washout alone, with which noise comes through. */
export function washoutAtDither({ scanS, omegaRadPerS, washoutRadPerS }: AveragedLoop): number {
  const none = { timeConstantsS: [], deadTimeS: 0 };
  return sizeOf(sampledAnswer(none, washoutRadPerS, scanS, complex(0, omegaRadPerS)));
}

/** What is recovered of a slope that changes as e^{st}: ½[e^{jφ}G(s + jω) + e^{−jφ}G(s − jω)], real for real s. */
function sideband({ plant, washoutRadPerS, scanS, omegaRadPerS, phaseRad }: AveragedLoop, s: number): number {
  const answer = sampledAnswer(plant, washoutRadPerS, scanS, complex(s, omegaRadPerS));
  return times(complex(Math.cos(phaseRad), Math.sin(phaseRad)), answer).re;
}

/**
 * Slow root r > 0 of the averaged loop s + κ₀·L(s)·G̃(s) = 0 at s = −r, where L is the low-pass and G̃ the demodulated
 * answer of plant and washout: the rate with which the error ends up decaying.
 *
 * @returns 1/s; NaN where the loop is so fast that it swings and has no real root
 * @source the averaged linear loop of K. B. Ariyur and M. Krstić (2003), "Real-Time Optimization by
 * Extremum-Seeking Control", section 1.2 (from memory); without lags it is s² + ωl·s + ωl·κ = 0
 */
export function slowRate(loop: AveragedLoop): number {
  const { loopRate, lowPassRadPerS: corner } = loop;
  const balance = (r: number) => (loopRate * corner * sideband(loop, -r)) / (corner - r) - r;
  const steps = 400;
  let below = 0;
  for (let i = 1; i < steps; i += 1) {
    const r = (i / steps) * corner;
    if (balance(r) <= 0) return bisected(balance, below, r);
    below = r;
  }
  return NaN;
}

function bisected(balance: (r: number) => number, low: number, high: number): number {
  let [below, above] = [low, high];
  for (let i = 0; i < 60; i += 1) {
    const middle = (below + above) / 2;
    if (balance(middle) > 0) below = middle;
    else above = middle;
  }
  return (below + above) / 2;
}
