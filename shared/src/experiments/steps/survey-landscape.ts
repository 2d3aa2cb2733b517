import type { Direction } from '../../objectives/objective.schema.js';

/** Mean objective at one actuator value. */
export interface SurveyPoint {
  /** Applied value, actuator unit. */
  value: number;
  objective: number;
  /** NaN where unknown. */
  standardError: number;
  isValid: boolean;
}

export interface SurveyFindings {
  best: { value: number; objective: number };
  /** Greatest |up − down| where both are valid; NaN without a way down. */
  hysteresis: number;
  /** Hills that stand out of the noise. */
  peaks: number;
}

/** A hill counts where it rises above its saddle by this many standard errors of a point. */
const standardErrorsOfAPeak = 3;
/** Share of the best objective below which a hill is rounding. */
const roundingShare = 1e-12;

/**
 * What a survey shows. A value is a candidate for the best where every visit to it was valid; its objective
 * is then the mean of the way up and the way down.
 *
 * @param up points in the order of the way up
 * @param down the same values in the same order, measured on the way down; empty without a way down
 * @returns null where no value is valid
 */
export function judgeSurvey(
  up: readonly SurveyPoint[],
  down: readonly SurveyPoint[],
  direction: Direction,
): SurveyFindings | null {
  const sign = direction === 'maximise' ? 1 : -1;
  const valid = up.flatMap((point, index) => joined(point, down[index]) ?? []);
  const [first] = valid;
  if (!first) return null;
  const best = valid.reduce((a, b) => (sign * b.objective > sign * a.objective ? b : a), first);
  const gaps = up.flatMap((point, index) => {
    const other = down[index];
    return other?.isValid && point.isValid ? Math.abs(point.objective - other.objective) : [];
  });
  return {
    best: { value: best.value, objective: best.objective },
    hysteresis: gaps.length > 0 ? Math.max(...gaps) : NaN,
    peaks: countPeaks(
      valid.map((point) => sign * point.objective),
      Math.max(standardErrorsOfAPeak * typicalError(valid), roundingShare * Math.abs(best.objective)),
    ),
  };
}

function joined(up: SurveyPoint, down: SurveyPoint | undefined): SurveyPoint | null {
  if (!up.isValid) return null;
  if (!down) return up;
  if (!down.isValid) return null;
  return {
    value: (up.value + down.value) / 2,
    objective: (up.objective + down.objective) / 2,
    standardError: Math.hypot(up.standardError, down.standardError) / 2,
    isValid: true,
  };
}

/** Root mean square of the standard errors; 0 where none is known. */
function typicalError(points: readonly SurveyPoint[]): number {
  const errors = points.map((point) => point.standardError).filter(Number.isFinite);
  if (errors.length === 0) return 0;
  return Math.sqrt(errors.reduce((sum, error) => sum + error * error, 0) / errors.length);
}

/**
 * Counts the hills of a curve whose prominence (height above the higher of the two saddles that part it
 * from higher ground) is above a threshold. The ends of the curve can be hills. A flat curve is one hill.
 *
 * @example
 * countPeaks([0, 3, 1, 2, 0], 0.5) // 2
 */
export function countPeaks(heights: readonly number[], prominenceMin: number): number {
  let count = 0;
  for (let i = 0; i < heights.length; i += 1) {
    const height = heights[i] ?? NaN;
    // Of a plateau only its left end stands for the hill.
    if (i > 0 && (heights[i - 1] ?? NaN) >= height) continue;
    const left = saddle(heights, i, -1);
    const right = saddle(heights, i, 1);
    const isHighest = !left.hasHigher && !right.hasHigher;
    const saddleHeight = Math.max(
      left.hasHigher ? left.lowest : -Infinity,
      right.hasHigher ? right.lowest : -Infinity,
    );
    if (isHighest || height - saddleHeight > prominenceMin) count += 1;
  }
  return count === 0 && heights.length > 0 ? 1 : count;
}

/** Walks from a point to higher ground (or, to the left, to equal ground that has been counted already). */
function saddle(heights: readonly number[], from: number, step: 1 | -1) {
  const height = heights[from] ?? NaN;
  let lowest = height;
  for (let i = from + step; i >= 0 && i < heights.length; i += step) {
    const here = heights[i] ?? NaN;
    if (here > height || (step === -1 && here === height)) return { hasHigher: true, lowest };
    lowest = Math.min(lowest, here);
  }
  return { hasHigher: false, lowest };
}
