import type { LawMargins, LawPrediction } from './law-size.types.js';
import { loopMargins, type TimeScaleMargins } from './loop-margins.js';
import { slowRate, type AveragedLoop } from './averaged-loop.js';
import { newtonConvergence } from './newton-convergence.js';
import { couplingOf, type AxisLoop, type SizedLoops } from './size-loops.js';
import { convergedShare, convergenceTime } from './predict-seeking.js';
import type { CheckedPlant } from './sizing-plant.schema.js';
import { symmetricEigen } from './symmetric-eigen.js';

/** What follows from gains; `rate` is along the fastest direction, `slowRate` along the slowest, 1/s. */
export interface LoopRates {
  rate: number;
  slowRate: number;
}

/**
 * Predicts a law that demodulates and integrates θ̂' = k·ξ around a quadratic.
 *
 * - Convergence: that of one loop (`convergenceTime`) with the rate of the slowest direction; without low-pass one
 *   period and an exponential.
 * - Ripple: Σ f_ii·a_i²/4, exact since the dithers do not meet.
 * - Noise: each slope has the density q_i = 2σ²·dt·|H|²/a_i². With θ' = −K·H·θ + noise the stationary loss
 *   ½·tr(H·P), from K·H·P + P·H·K = Q, is ¼·Σ k_i·q_i/ρ_i whatever the coupling (in coordinates K^{−½}θ the
 *   drift matrix is symmetric, and the loss ½·Σ λ·Q/(2λ)).
 * - Drift: v is followed (K·H)⁻¹·v behind, at a loss of half of that in H.
 *
 * @param gains k_i
 */
export function predictGradientLaw(
  plant: CheckedPlant,
  { axes }: SizedLoops,
  gains: readonly number[],
  rates: LoopRates,
): LawPrediction {
  const speeds = axes.map(({ share }, i) => plant.actuators[i]!.driftPerS / (gains[i]! * share));
  const driftLag = solveCurvature(plant.curvature, speeds);
  const noise = axes.map((axis, i) => (gains[i]! * slopeDensity(axis)) / (4 * axis.share));
  return {
    convergenceS: convergenceOf(slowestAxis(axes).loop, slowestAxis(axes).share, rates.slowRate),
    rippleLoss: rippleLossOf(axes),
    noiseLoss: noise.reduce((sum, loss) => sum + loss, 0),
    driftLag,
    driftLoss: quadratic(plant.curvature, driftLag) / 2,
    gradientNoise: axes.map(gradientNoiseOf),
  };
}

/**
 * As `predictGradientLaw`, for θ̂' = rate·Γ·ξ with Γ the inverse of the curvature: κ = rate·ρ everywhere once Γ is
 * known, which is from the beginning where the survey was right.
 */
export function predictNewtonLaw(
  plant: CheckedPlant,
  { axes, slowest: spread }: SizedLoops,
  { rate, inverseRate, hessianRatio }: { rate: number; inverseRate: number; hessianRatio: number },
): LawPrediction {
  const inverse = inverseDiagonal(plant.curvature);
  const slowest = slowestAxis(axes);
  const driftLag = axes.map(({ share }, i) => plant.actuators[i]!.driftPerS / (rate * share));
  const noise = axes.map((axis, i) => (rate * slopeDensity(axis) * inverse[i]!) / (4 * axis.share));
  return {
    convergenceS: newtonConvergence({
      // The survey has told the whole curvature.
      curvature: spread > 0 ? 1 : NaN,
      rate: rate * slowest.share,
      inverseRate,
      hessianRadPerS: hessianRatio * slowest.loop.omegaRadPerS,
      lowPassRadPerS: slowest.loop.lowPassRadPerS,
      settleS: (2 * Math.PI) / slowest.loop.omegaRadPerS,
    }),
    rippleLoss: rippleLossOf(axes),
    noiseLoss: noise.reduce((sum, loss) => sum + loss, 0),
    driftLag,
    driftLoss: quadratic(plant.curvature, driftLag) / 2,
    gradientNoise: axes.map(gradientNoiseOf),
  };
}

const slowestAxis = (axes: readonly AxisLoop[]): AxisLoop =>
  axes.reduce((a, b) => (b.loop.omegaRadPerS < a.loop.omegaRadPerS ? b : a));

/** Time until a tenth of the distance is left, of one loop whose error decays with `rate` at first. */
function convergenceOf(loop: AveragedLoop, share: number, rate: number): number {
  const settleS = (2 * Math.PI) / loop.omegaRadPerS;
  if (loop.lowPassRadPerS === Infinity) return settleS - Math.log(convergedShare) / rate;
  const whole = { ...loop, loopRate: rate / share };
  return Number.isNaN(slowRate(whole)) ? NaN : convergenceTime(whole, rate);
}

export const rippleLossOf = (axes: readonly AxisLoop[]): number =>
  axes.reduce((sum, { curvature, amplitude }) => sum + (curvature * amplitude * amplitude) / 4, 0);

/** Density of the demodulated noise, q = 2σ²·dt/a². */
export const slopeDensity = ({ noise, loop, amplitude }: AxisLoop): number =>
  (2 * noise * noise * loop.scanS) / (amplitude * amplitude);

/** Behind the low-pass; without one, from scan to scan. */
function gradientNoiseOf(axis: AxisLoop): number {
  const { lowPassRadPerS, scanS } = axis.loop;
  const band = lowPassRadPerS === Infinity ? 1 / scanS : lowPassRadPerS / 2;
  return Math.sqrt(slopeDensity(axis) * band);
}

/** xᵀ·H·x */
const quadratic = (matrix: readonly (readonly number[])[], x: readonly number[]): number =>
  matrix.reduce((sum, row, i) => sum + x[i]! * row.reduce((inner, h, j) => inner + h * x[j]!, 0), 0);

/** Solution of H·x = b; infinite where H has no inverse that is positive. */
function solveCurvature(matrix: readonly (readonly number[])[], b: readonly number[]): number[] {
  const { values, vectors } = symmetricEigen(matrix);
  return b.map((_, i) =>
    vectors.reduce((sum, vector, m) => {
      const along = vector.reduce((inner, v, j) => inner + v * b[j]!, 0);
      return along === 0 ? sum : sum + (vector[i]! * along) / Math.max(values[m]!, 0);
    }, 0),
  );
}

/** Diagonal of the inverse of the curvature. */
export function inverseDiagonal(matrix: readonly (readonly number[])[]): number[] {
  return matrix.map(
    (_, i) =>
      solveCurvature(
        matrix,
        matrix.map((__, j) => (i === j ? 1 : 0)),
      )[i]!,
  );
}

/** Least margins of a law with periodic dithers that adapts at `rate` along its fastest direction. */
export function leastMargins({ axes, apartRadPerS }: SizedLoops, rate: number): LawMargins {
  const each = axes.map(({ loop }) => loopMargins(loop, rate));
  const least = (name: keyof TimeScaleMargins) => Math.min(...each.map((margins) => margins[name]));
  const lowPass = least('lowPassOverSwing');
  return {
    plantOverDither: least('plantOverDither'),
    ditherOverAdaptation: least('ditherOverAdaptation'),
    lowPassOverSwing: Number.isFinite(lowPass) ? lowPass : null,
    linesOverAdaptation: Number.isFinite(apartRadPerS) ? apartRadPerS / rate : null,
    delayMargin: least('delayMargin'),
    scansPerPeriod: least('scansPerPeriod'),
  };
}

/** Rates along the fastest and the slowest direction where the fastest has been set. */
export function ratesOf(plant: CheckedPlant, rate: number): LoopRates {
  return { rate, slowRate: rate * couplingOf(plant.curvature).slowest };
}
