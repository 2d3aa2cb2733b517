import type { AveragedLoop } from './averaged-loop.js';
import { complex, lagOf, sampledAnswer } from './plant-answer.js';

/** How far the time scales lie apart; every one should be well above 1. */
export interface TimeScaleMargins {
  /** Corner of the plant over the dither: 1/(ω·τ), with all lags in τ. */
  plantOverDither: number;
  /** Dither over adaptation, ω/κ. */
  ditherOverAdaptation: number;
  /** Low-pass over the rate at which the loop begins to swing, ωl/(4κ). */
  lowPassOverSwing: number;
  /** π/2 over κ·delay, where the delayed loop would become unstable. */
  delayMargin: number;
  scansPerPeriod: number;
}

/**
 * Margins of one demodulating loop. The delay is the slope of the plant's lag at the dither.
 *
 * @param rate adaptation, 1/s
 */
export function loopMargins(loop: AveragedLoop, rate: number): TimeScaleMargins {
  const { plant, omegaRadPerS: omega, lowPassRadPerS, scanS } = loop;
  const lagS = plant.timeConstantsS.reduce((sum, tau) => sum + tau, plant.deadTimeS);
  const nearby = omega * 1e-3;
  const lagAt = (w: number) => lagOf(sampledAnswer(plant, 0, scanS, complex(0, w)));
  const delayS = (lagAt(omega + nearby) - lagAt(omega - nearby)) / (2 * nearby);
  return {
    plantOverDither: 1 / (omega * lagS),
    ditherOverAdaptation: omega / rate,
    lowPassOverSwing: lowPassRadPerS / (4 * rate),
    delayMargin: delayS > 0 ? Math.PI / 2 / (rate * delayS) : Infinity,
    scansPerPeriod: (2 * Math.PI) / (omega * scanS),
  };
}
