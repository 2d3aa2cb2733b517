import { checkSettings } from '../signals/check-settings.js';

/**
 * Time that a first-order lag needs to come within a band of its final value, for good.
 *
 * @param timeConstantS τ, s
 * @param band share of the whole step, above 0, below 1
 * @returns −τ·ln(band), s
 * @throws analysis.invalid-input
 * @example
 * firstOrderSettlingS(1, 0.02) // 3.912023005428146
 */
export function firstOrderSettlingS(timeConstantS: number, band: number): number {
  checkSettings([band > 0 && band < 1, 'band', 'must be above 0 and below 1.']);
  return -timeConstantS * Math.log(band);
}

/** Time from 10 % to 90 % of a first-order step: τ·ln 9, s. */
export function firstOrderRiseS(timeConstantS: number): number {
  return timeConstantS * Math.log(9);
}

/** Answer of a first-order lag with dead time to a sine, for a unit gain. */
export function firstOrderAnswer(
  frequencyHz: number,
  timeConstantS: number,
  deadTimeS = 0,
): { gain: number; phaseRad: number } {
  const omega = 2 * Math.PI * frequencyHz;
  return {
    gain: 1 / Math.hypot(1, omega * timeConstantS),
    phaseRad: -Math.atan(omega * timeConstantS) - omega * deadTimeS,
  };
}
