import type { AxisDither } from './axis-dither.js';
import {
  createFilterBank,
  resetFilterBank,
  restFilterBank,
  stepFilterBank,
  type FilterBank,
} from './filter-bank.js';

/** How the plant behind the map lags; both zero for a plant that answers at once. */
export interface PlantLag {
  readonly timeConstantS: number;
  readonly deadTimeS: number;
}

/** Answer of plant and washout is not made up for by more than this. */
const boostMax = 10;

/** Real and imaginary part of what a component at one frequency is multiplied with, 1/L there. */
interface Compensation {
  readonly real: number;
  readonly imaginary: number;
}

interface HessianEntry {
  readonly row: number;
  readonly column: number;
  readonly atDifference: Compensation;
  readonly atSum: Compensation;
}

/** Second derivatives of the objective from sine dithers. */
export interface HessianEstimator {
  readonly size: number;
  readonly washout: FilterBank;
  /** One for each entry. */
  readonly lowPasses: FilterBank;
  readonly entries: readonly HessianEntry[];
  readonly sines: Float64Array;
  readonly cosines: Float64Array;
  /** Row by row, objective unit / actuator unit². */
  readonly hessian: Float64Array;
}

export function createHessianEstimator(
  dithers: readonly AxisDither[],
  lag: PlantLag,
  washoutRatio: number,
  lowPassRatio: number,
): HessianEstimator {
  const size = dithers.length;
  const slowest = Math.min(...dithers.map(({ omega }) => omega));
  const washoutCorner = washoutRatio * slowest;
  const entries: HessianEntry[] = [];
  dithers.forEach((first, row) =>
    dithers.slice(0, row + 1).forEach((second, column) => {
      const answer = (omega: number) => compensation(omega, lag, washoutCorner);
      entries.push({
        row,
        column,
        atDifference: answer(first.omega - second.omega),
        atSum: answer(first.omega + second.omega),
      });
    }),
  );
  return {
    size,
    washout: createFilterBank(Float64Array.of(washoutCorner)),
    lowPasses: createFilterBank(Float64Array.from(entries, () => lowPassRatio * slowest)),
    entries,
    sines: new Float64Array(size),
    cosines: new Float64Array(size),
    hessian: new Float64Array(size * size),
  };
}

/** 1/L(jω) of plant and washout, its size bounded; 0 at frequency 0, where the washout leaves nothing. */
function compensation(omega: number, lag: PlantLag, washoutCorner: number): Compensation {
  if (omega === 0) return { real: 0, imaginary: 0 };
  const size = Math.min(
    boostMax,
    Math.hypot(1, omega * lag.timeConstantS) * Math.hypot(1, washoutCorner / omega),
  );
  const angle =
    Math.atan(omega * lag.timeConstantS) + omega * lag.deadTimeS - Math.atan(washoutCorner / omega);
  return { real: size * Math.cos(angle), imaginary: size * Math.sin(angle) };
}

/** Puts the filters to rest on a Hessian whose negative is given, row by row. */
export function resetHessianEstimator(estimator: HessianEstimator, curvature: Float64Array): void {
  const { entries, lowPasses, size } = estimator;
  resetFilterBank(estimator.washout);
  for (let e = 0; e < entries.length; e += 1) {
    const { row, column } = entries[e] as HessianEntry;
    lowPasses.input[e] = -(curvature[row * size + column] as number);
  }
  restFilterBank(lowPasses);
  writeHessian(estimator);
}

/** The low-passed entries to both sides of the diagonal. */
function writeHessian({ entries, lowPasses, hessian, size }: HessianEstimator): void {
  for (let e = 0; e < entries.length; e += 1) {
    const { row, column } = entries[e] as HessianEntry;
    const value = lowPasses.output[e] as number;
    hessian[row * size + column] = value;
    hessian[column * size + row] = value;
  }
}

/**
 * Demodulates with N_ii = (16/a_i²)(sin² − ½) = −(8/a_i²)·cos 2ω_i t and
 * N_ij = (4/(a_i·a_j))·sin·sin = (2/(a_i·a_j))·(cos(ω_i − ω_j)t − cos(ω_i + ω_j)t), each component turned and
 * stretched by what plant and washout did to it. The mean of N·y is the Hessian while no two of the frequencies
 * 2ω_i, ω_i ± ω_j meet each other or an ω_k.
 *
 * @param objective one usable number
 * @realtime safe: allocates nothing
 */
export function stepHessianEstimator(
  estimator: HessianEstimator,
  dithers: readonly AxisDither[],
  objective: Float64Array,
  dtS: number,
): void {
  const { size, sines, cosines, entries, washout, lowPasses } = estimator;
  washout.input[0] = objective[0] as number;
  stepFilterBank(washout, dtS);
  const washed = (objective[0] as number) - (washout.output[0] as number);
  for (let i = 0; i < size; i += 1) {
    const { phase } = dithers[i] as AxisDither;
    sines[i] = Math.sin(phase);
    cosines[i] = Math.cos(phase);
  }
  for (let e = 0; e < entries.length; e += 1) {
    lowPasses.input[e] = demodulatorOf(estimator, dithers, entries[e] as HessianEntry) * washed;
  }
  stepFilterBank(lowPasses, dtS);
  writeHessian(estimator);
}

function demodulatorOf(
  { sines, cosines }: HessianEstimator,
  dithers: readonly AxisDither[],
  { row, column, atDifference, atSum }: HessianEntry,
): number {
  const first = dithers[row] as AxisDither;
  const second = dithers[column] as AxisDither;
  const ss = (sines[row] as number) * (sines[column] as number);
  const cc = (cosines[row] as number) * (cosines[column] as number);
  const sc = (sines[row] as number) * (cosines[column] as number);
  const cs = (cosines[row] as number) * (sines[column] as number);
  const sum = atSum.real * (cc - ss) + atSum.imaginary * (sc + cs);
  const sizes = first.axis.amplitude * first.scale * second.axis.amplitude * second.scale;
  if (row === column) return (-8 / sizes) * sum;
  return (2 / sizes) * (atDifference.real * (cc + ss) + atDifference.imaginary * (sc - cs) - sum);
}
