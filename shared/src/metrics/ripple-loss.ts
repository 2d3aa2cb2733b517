import type { Direction } from '../objectives/objective.schema.js';
import { checkSettings } from '../signals/check-settings.js';
import { meanInterval, type MeanInterval, type MeanIntervalSettings } from './mean-interval.js';

/** Mean square of a dither over that of its amplitude. */
const meanSquares = { sine: 1 / 2, square: 1 } as const;

/**
 * What dithering costs on average at the best point of a quadratic map: |f''|·⟨dither²⟩/2, that is |f''|a²/4
 * for a sine and |f''|a²/2 for a square.
 *
 * @param amplitude a, half of peak to peak, actuator unit; 0 or above
 * @param curvature second derivative of the objective, objective unit per actuator unit²
 * @returns objective unit, 0 or above
 * @throws analysis.invalid-input
 * @source M. Krstić and H.-H. Wang (2000), Automatica 36:595–601 (the a²ν''/4 of the averaged equilibrium)
 * @example
 * ditherLoss(0.2, 3, 'sine') // 0.03
 */
export function ditherLoss(amplitude: number, curvature: number, shape: keyof typeof meanSquares): number {
  checkSettings([amplitude >= 0, 'amplitude', 'must be 0 or above.']);
  return (Math.abs(curvature) * amplitude * amplitude * meanSquares[shape]) / 2;
}

/**
 * What a run lost on average behind the best, with its interval: compare it with `ditherLoss`, which nothing
 * that dithers can go below.
 *
 * @param objectives samples after the law has converged; whole dither periods, evenly spaced
 * @param best objective at the best point
 * @throws analysis.invalid-input, analysis.too-little-data
 */
export function measuredLoss(
  objectives: ArrayLike<number>,
  best: number,
  direction: Direction,
  settings: MeanIntervalSettings = {},
): MeanInterval {
  const sign = direction === 'maximise' ? 1 : -1;
  return meanInterval(
    Array.from(objectives, (objective) => sign * (best - objective)),
    settings,
  );
}
