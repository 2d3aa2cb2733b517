import type { Estimate } from '../signals/estimate.js';

/** Mean objective at one place of a survey. */
export interface SurveySample {
  objective: number;
  /** Of that mean; NaN where unknown. */
  standardError: number;
  /** False where a validity condition of the objective was not met. */
  isValid: boolean;
}

/** A hill of the map (a hollow where the objective is to be made small). */
export interface SurveyHill {
  /** Index of its best sample. */
  index: number;
  /** Objective there, as measured. */
  objective: number;
  /** How far the objective must get worse on the way to a better place; never below 0. */
  prominence: number;
  /** True where the prominence stands out of the noise, or where it is the best of all. */
  isDistinct: boolean;
}

export interface SurveyCurveHill extends SurveyHill {
  /** Actuator value of its best sample. */
  value: number;
  /**
   * By a parabola through the samples around; null where they determine none, as at an end of the range, and of
   * hills that are not distinct.
   */
  peak: { position: Estimate; height: Estimate; curvature: Estimate } | null;
}

/** A hill stands out where its prominence is above this many standard errors of the difference of two samples. */
export const distinctErrors = 3;
