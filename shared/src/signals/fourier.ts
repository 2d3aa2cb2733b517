import { FourierPlan } from './fourier-plan.js';

/**
 * Discrete Fourier transform X_k = Σ x_n·e^(−2πi·kn/N), in place, of any length. Where many of one length are
 * needed, keep a `FourierPlan`.
 *
 * @param re real parts, replaced by those of the transform
 * @param im imaginary parts, of the same length
 */
export function fourierTransform(re: Float64Array, im: Float64Array): void {
  new FourierPlan(re.length).transform(re, im);
}
