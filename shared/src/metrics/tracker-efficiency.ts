import { checkSeries, checkSettings } from '../signals/check-settings.js';
import { TrackingMeter } from './tracking-meter.js';

/** What a maximum-power-point tracker took, and what was to be had. */
export interface TrackerRecord {
  /** V. */
  voltages: ArrayLike<number>;
  /** A. */
  currents: ArrayLike<number>;
  /** Greatest power to be had at that time, W. */
  availablePowers: ArrayLike<number>;
  /** Time that each sample stands for, s; above 0. */
  durationsS: ArrayLike<number>;
}

/**
 * Dynamic efficiency of a tracker: Σ U·I·Δt / Σ P_MPP·Δt.
 *
 * @returns 0 to 1
 * @throws analysis.invalid-input, analysis.too-little-data
 * @source EN 50530:2010, dynamic MPPT efficiency (from memory)
 */
export function dynamicEfficiency(record: TrackerRecord): number {
  const { voltages, currents, availablePowers, durationsS } = record;
  const count = voltages.length;
  checkSeries(voltages, 'voltages', 1);
  for (const [field, series] of Object.entries({ currents, availablePowers, durationsS })) {
    checkSeries(series, field, count);
    checkSettings([series.length === count, field, 'must be as many as the voltages.']);
  }
  const meter = new TrackingMeter('maximise');
  for (let i = 0; i < count; i += 1) {
    checkSettings([durationsS[i]! > 0, `durationsS[${i}]`, 'must be above 0.']);
    meter.add(voltages[i]! * currents[i]!, availablePowers[i]!, durationsS[i]!);
  }
  return meter.efficiency;
}

/** Share of rated power and its weight. */
type Weighting = readonly (readonly [load: number, weight: number])[];

/** @source EN 50530:2010, European and Californian weighting of static efficiencies */
export const staticWeightings: Readonly<Record<'european' | 'californian', Weighting>> = {
  european: [
    [0.05, 0.03],
    [0.1, 0.06],
    [0.2, 0.13],
    [0.3, 0.1],
    [0.5, 0.48],
    [1, 0.2],
  ],
  californian: [
    [0.1, 0.04],
    [0.2, 0.05],
    [0.3, 0.12],
    [0.5, 0.21],
    [0.75, 0.53],
    [1, 0.05],
  ],
};

/**
 * Weighted static efficiency.
 *
 * @param efficiencyAt measured efficiency by share of rated power, 0 to 1
 * @throws analysis.invalid-input where a load of the weighting was not measured
 */
export function weightedEfficiency(
  efficiencyAt: ReadonlyMap<number, number>,
  weighting: keyof typeof staticWeightings,
): number {
  return staticWeightings[weighting].reduce((sum, [load, weight]) => {
    const efficiency = efficiencyAt.get(load) ?? NaN;
    checkSettings([
      efficiency >= 0 && efficiency <= 1,
      `efficiencyAt[${load}]`,
      'must be measured, from 0 to 1.',
    ]);
    return sum + weight * efficiency;
  }, 0);
}
