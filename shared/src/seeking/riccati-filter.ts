/**
 * The Riccati filter Γ' = ωr·Γ − ωr·Γ·Ĥ·Γ, whose Γ tends to the inverse of a positive definite Ĥ. It is kept as
 * P = Γ⁻¹, for which it is linear, P' = ωr·(Ĥ − P), and so has the exact step P ← P + (1 − e^{−ωr·dt})(Ĥ − P).
 * Γ itself is never formed; Γ·g is solved for by the Cholesky factor of P.
 *
 * Where a step would leave P no longer positive definite (the map bends the other way there, or noise) it is not
 * taken: Γ keeps its last positive definite value, and Γ·g points uphill still.
 *
 * @source A. Ghaffari, M. Krstić and D. Nešić (2012), "Multivariable Newton-based extremum seeking", Automatica
 * 48:1759–1767 (from memory); the linear form follows from d(Γ⁻¹) = −Γ⁻¹·dΓ·Γ⁻¹
 */
export interface RiccatiFilter {
  readonly size: number;
  /** ωr, 1/s. */
  readonly rate: number;
  /** P = Γ⁻¹, row by row. */
  readonly inverse: Float64Array;
  /** Lower Cholesky factor of P, row by row. */
  readonly factor: Float64Array;
  readonly trial: Float64Array;
  readonly trialFactor: Float64Array;
  /** Smallest square of a pivot that counts as positive. */
  readonly floors: Float64Array;
}

/** Share of the first guess under which a pivot no longer counts as positive. */
const floorShare = 0.01;

/**
 * @param inverseDiagonal first guess of Γ⁻¹, its diagonal; each above zero
 * @param rate ωr, 1/s
 * @param beside first guess of what stands beside the diagonal, its rows below it (the first has one entry); is
 * left out where the whole would not be positive definite
 */
export function createRiccatiFilter(
  inverseDiagonal: ArrayLike<number>,
  rate: number,
  beside: readonly (readonly number[])[] = [],
): RiccatiFilter {
  const size = inverseDiagonal.length;
  const matrix = () => new Float64Array(size * size);
  const filter: RiccatiFilter = {
    size,
    rate,
    inverse: matrix(),
    factor: matrix(),
    trial: matrix(),
    trialFactor: matrix(),
    floors: Float64Array.from(inverseDiagonal, (value) => value * floorShare),
  };
  for (let i = 0; i < size; i += 1) {
    const value = inverseDiagonal[i] ?? NaN;
    filter.inverse[i * size + i] = value;
    filter.factor[i * size + i] = Math.sqrt(value);
  }
  if (beside.length > 0) beginBeside(filter, beside);
  return filter;
}

function beginBeside(filter: RiccatiFilter, beside: readonly (readonly number[])[]): void {
  const { size, inverse, factor, trial, trialFactor } = filter;
  trial.set(inverse);
  beside.forEach((row, r) =>
    row.forEach((value, j) => {
      trial[(r + 1) * size + j] = value;
      trial[j * size + r + 1] = value;
    }),
  );
  if (!factorise(filter)) return;
  inverse.set(trial);
  factor.set(trialFactor);
}

/**
 * One step towards a symmetric matrix.
 *
 * @param target Ĥ, row by row
 * @returns true where the step was taken
 * @realtime safe: allocates nothing
 */
export function stepRiccatiFilter(filter: RiccatiFilter, target: Float64Array, dtS: number): boolean {
  const { inverse, trial, factor, trialFactor } = filter;
  const share = -Math.expm1(-filter.rate * dtS);
  for (let i = 0; i < trial.length; i += 1) {
    const now = inverse[i] as number;
    trial[i] = now + share * ((target[i] as number) - now);
  }
  if (!factorise(filter)) return false;
  for (let i = 0; i < trial.length; i += 1) {
    inverse[i] = trial[i] as number;
    factor[i] = trialFactor[i] as number;
  }
  return true;
}

/** Γ·vector into `result`, which may be `vector` itself. */
export function applyRiccatiFilter(
  { size, factor }: RiccatiFilter,
  vector: Float64Array,
  result: Float64Array,
): void {
  for (let i = 0; i < size; i += 1) {
    let sum = vector[i] as number;
    for (let k = 0; k < i; k += 1) sum -= (factor[i * size + k] as number) * (result[k] as number);
    result[i] = sum / (factor[i * size + i] as number);
  }
  for (let i = size - 1; i >= 0; i -= 1) {
    let sum = result[i] as number;
    for (let k = i + 1; k < size; k += 1) sum -= (factor[k * size + i] as number) * (result[k] as number);
    result[i] = sum / (factor[i * size + i] as number);
  }
}

/** Cholesky factor of the trial; false where it is not positive definite beyond the floors. */
function factorise({ size, trial, trialFactor, floors }: RiccatiFilter): boolean {
  for (let i = 0; i < size; i += 1) {
    for (let j = 0; j <= i; j += 1) {
      let sum = trial[i * size + j] as number;
      for (let k = 0; k < j; k += 1) {
        sum -= (trialFactor[i * size + k] as number) * (trialFactor[j * size + k] as number);
      }
      if (i !== j) trialFactor[i * size + j] = sum / (trialFactor[j * size + j] as number);
      else if (!(sum > (floors[i] as number))) return false;
      else trialFactor[i * size + i] = Math.sqrt(sum);
    }
  }
  return true;
}
