import type { DitherKind } from './seeking-law.js';

/** Harmonics of the square that are summed; what they differ by from a plant without washout falls with n³. */
const harmonicsMax = 401;

/**
 * Share of the slope that demodulation recovers behind a washout H = s/(s + r·ω) and a static plant:
 * Re[e^{jφ}H(jω)] for a sine; for a square (8/π²)·Σ Re[e^{jnφ}H(jnω)]/n² over odd n; for measured ripple cos φ,
 * since the reference goes through the same washout.
 *
 * @param washoutRatio corner over dither frequency r
 * @param phaseRad lag of the demodulation φ, rad
 */
export function recoveredShare(kind: DitherKind, washoutRatio: number, phaseRad: number): number {
  if (kind === 'measured') return Math.cos(phaseRad);
  if (kind === 'sine') return shareAt(1, washoutRatio, phaseRad);
  // Without washout: the correlation of two squares, a triangle.
  const lag = Math.abs(phaseRad - 2 * Math.PI * Math.round(phaseRad / (2 * Math.PI)));
  let sum = 0;
  for (let n = 1; n <= harmonicsMax; n += 2) {
    sum += (shareAt(n, washoutRatio, phaseRad) - Math.cos(n * phaseRad)) / (n * n);
  }
  return 1 - (2 / Math.PI) * lag + (8 / Math.PI ** 2) * sum;
}

function shareAt(n: number, washoutRatio: number, phaseRad: number): number {
  const ratio = washoutRatio / n;
  return Math.cos(n * phaseRad + Math.atan(ratio)) / Math.hypot(1, ratio);
}
