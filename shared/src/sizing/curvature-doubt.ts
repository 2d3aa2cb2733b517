import type { CheckedPlant } from './sizing-plant.schema.js';

/** Largest relative standard error of the curvature along any actuator; 0 where none is known. */
export function curvatureDoubt({ curvature, curvatureErrors }: CheckedPlant): number {
  return Math.max(0, ...(curvatureErrors ?? []).map((error, i) => error / (curvature[i]?.[i] ?? NaN)));
}
