import type { SeekingAxis, TaperParameters } from './law-parameters.js';

/** Change of the dither from one period to the next: down while the estimate stands still, up when it moves. */
const shrink = 0.8;
const grow = 2;

/** Watches the mean of the estimate from period to period and scales the dither. */
export interface TaperState {
  readonly parameters: TaperParameters;
  readonly periodS: number;
  /** Change of the mean that counts as standing still, actuator units. */
  readonly bands: Float64Array;
  /** Share of the full amplitude that is put out. */
  scale: number;
  readonly sums: Float64Array;
  readonly lastMeans: Float64Array;
  count: number;
  elapsedS: number;
  stillPeriods: number;
}

export function createTaper(
  parameters: TaperParameters,
  axes: readonly SeekingAxis[],
  periodS: number,
): TaperState {
  return {
    parameters,
    periodS,
    bands: Float64Array.from(axes, ({ amplitude }) => amplitude * (parameters?.band ?? 0)),
    scale: 1,
    sums: new Float64Array(axes.length),
    lastMeans: new Float64Array(axes.length).fill(NaN),
    count: 0,
    elapsedS: 0,
    stillPeriods: 0,
  };
}

/** Full dither again, and nothing known of the estimate. */
export function restoreTaper(taper: TaperState): void {
  if (!taper.parameters) return;
  taper.scale = 1;
  taper.sums.fill(0);
  taper.lastMeans.fill(NaN);
  taper.count = 0;
  taper.elapsedS = 0;
  taper.stillPeriods = 0;
}

/** @realtime safe: allocates nothing */
export function stepTaper(taper: TaperState, estimate: Float64Array, dtS: number): void {
  if (!taper.parameters) return;
  const { sums } = taper;
  for (let i = 0; i < sums.length; i += 1) sums[i] = (sums[i] as number) + (estimate[i] as number);
  taper.count += 1;
  taper.elapsedS += dtS;
  if (taper.elapsedS + dtS / 2 < taper.periodS) return;
  judgePeriod(taper, taper.parameters);
}

function judgePeriod(taper: TaperState, { afterPeriods, floor }: NonNullable<TaperParameters>): void {
  const { sums, lastMeans, bands } = taper;
  let isStill = true;
  for (let i = 0; i < sums.length; i += 1) {
    const mean = (sums[i] as number) / taper.count;
    if (!(Math.abs(mean - (lastMeans[i] as number)) < (bands[i] as number))) isStill = false;
    lastMeans[i] = mean;
    sums[i] = 0;
  }
  taper.count = 0;
  taper.elapsedS = Math.max(0, taper.elapsedS - taper.periodS);
  taper.stillPeriods = isStill ? taper.stillPeriods + 1 : 0;
  if (taper.stillPeriods >= afterPeriods) taper.scale = Math.max(floor, taper.scale * shrink);
  else if (!isStill) taper.scale = Math.min(1, taper.scale * grow);
}
