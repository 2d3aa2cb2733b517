import { DomainError } from '../errors/domain-error.js';
import { checkSeries } from '../signals/check-settings.js';
import { describeFit, weightsOf, type LeastSquaresFit } from './least-squares.js';
import { solveByReflections } from './solve-by-reflections.js';

/** A model of data: its value and its derivatives by each parameter. */
export interface NonlinearModel {
  /** Value at datum i; no finite number where the parameters are impossible. */
  valueAt(parameters: readonly number[], i: number): number;
  slopesAt(parameters: readonly number[], i: number): number[];
}

const stepsMax = 200;
/** A step that lowers the sum of squares by less than this share ends the search. */
const gainShare = 1e-14;
const dampingMax = 1e12;

/**
 * Nonlinear least squares: damped Gauss–Newton steps from a start, with the covariance from the derivatives at
 * the end. It ends in the minimum that the start leads to.
 *
 * @param y data
 * @param start parameters to begin with
 * @param standardErrors as in `fitLinear`
 * @throws analysis.invalid-input, analysis.too-little-data; analysis.no-fit where the data do not tell the
 * parameters apart, or no end is found
 * @source D. W. Marquardt (1963), "An algorithm for least-squares estimation of nonlinear parameters", SIAM J.
 * 11:431–441; scaling: J. J. Moré (1978), "The Levenberg-Marquardt algorithm: implementation and theory",
 * LNM 630 (Springer)
 */
export function fitNonlinear(
  model: NonlinearModel,
  y: ArrayLike<number>,
  start: readonly number[],
  standardErrors?: ArrayLike<number>,
): LeastSquaresFit {
  checkSeries(y, 'y', start.length);
  const weights = weightsOf(y.length, standardErrors);
  const fit = new Descent(model, y, weights);
  const parameters = fit.descend([...start]);
  const { inverse } = solveByReflections(fit.weightedSlopes(parameters), new Array<number>(y.length).fill(0));
  return describeFit(parameters, inverse, fit.residuals(parameters), weights, standardErrors !== undefined);
}

class Descent {
  /** Greatest length of each column of slopes so far: a parameter that the data lose sight of stays held. */
  private scales: number[] = [];

  constructor(
    private readonly model: NonlinearModel,
    private readonly y: ArrayLike<number>,
    private readonly weights: Float64Array,
  ) {}

  residuals(parameters: readonly number[]): Float64Array {
    return Float64Array.from(this.y, (value, i) => value - this.model.valueAt(parameters, i));
  }

  weightedSlopes(parameters: readonly number[]): number[][] {
    return Array.from(this.y, (_, i) =>
      this.model.slopesAt(parameters, i).map((slope) => slope * this.weights[i]!),
    );
  }

  descend(start: number[]): number[] {
    let parameters = start;
    let cost = this.cost(parameters);
    if (!Number.isFinite(cost)) throw new DomainError('analysis.no-fit');
    let damping = 1e-3;
    for (let i = 0; i < stepsMax; i += 1) {
      const next = this.step(parameters, damping);
      const nextCost = this.cost(next);
      if (!(nextCost <= cost)) {
        damping *= 8;
        if (damping > dampingMax) return parameters;
        continue;
      }
      const hasEnded = cost - nextCost <= gainShare * cost;
      [parameters, cost] = [next, nextCost];
      if (hasEnded) return parameters;
      damping = Math.max(damping / 8, 1e-12);
    }
    throw new DomainError('analysis.no-fit');
  }

  private cost(parameters: readonly number[]): number {
    return this.residuals(parameters).reduce((sum, value, i) => sum + (value * this.weights[i]!) ** 2, 0);
  }

  /** The damping holds each parameter back in proportion to how well the data know it. */
  private step(parameters: readonly number[], damping: number): number[] {
    const slopes = this.weightedSlopes(parameters);
    this.scales = parameters.map((_, j) =>
      Math.max(this.scales[j] ?? 0, Math.sqrt(slopes.reduce((sum, row) => sum + row[j]! ** 2, 0))),
    );
    const held = this.scales.map((scale) => Math.sqrt(damping) * scale);
    const rows = [...slopes, ...held.map((size, j) => parameters.map((_, k) => (k === j ? size : 0)))];
    const wanted = this.residuals(parameters).map((value, i) => value * this.weights[i]!);
    const { x } = solveByReflections(rows, [...wanted, ...parameters.map(() => 0)]);
    return parameters.map((value, j) => value + x[j]!);
  }
}
