import { goldenSection } from '../kit/golden-section.js';
import { seededRandom } from '../kit/seeded-random.js';
import { bestDelayUs, flashShiftUs, storedShare } from './lamp-pump.js';
import { cleanAt, energiesAt } from './pulse-table.js';

/** What makes a pulse of drive and delay. */
export const plant = {
  /** Inversion over threshold at full drive and best delay. */
  fullInversion: 5,
  /** Energy of one emptied threshold, mJ, and lifetime of the cavity, ns. */
  thresholdMJ: 50,
  lifetimeNs: 20,
  /** Share that a hot rod loses at full drive; grows with the square of the drive. */
  heatLoss: 0.2,
} as const;

/** The hidden state: how lamp and rod stand at a moment. */
export interface PulserHidden {
  /** Factor on the inversion: ageing lamp, temperature of the coolant. */
  readonly gain: number;
  /** The flash comes so much later than when new, µs. */
  readonly laterUs: number;
}

const wander = { gain: 0.08, gainPeriodS: 1400, laterUs: 25, laterPeriodS: 1000 };

/** The hidden state at a bench time: two swings, whose phases the seed chooses. */
export function wanderingPulser(seed: number, isDrifting: boolean): (tS: number) => PulserHidden {
  if (!isDrifting) return () => ({ gain: 1, laterUs: 0 });
  // A source of its own, so that the noise does not depend on whether there is a drift.
  const random = seededRandom(seed ^ 0x91e5);
  const [phase1, phase2] = [random.uniform(), random.uniform()];
  const swing = (tS: number, periodS: number, phase: number) =>
    Math.sin(2 * Math.PI * (tS / periodS + phase));
  return (tS) => ({
    gain: 1 + wander.gain * swing(tS, wander.gainPeriodS, phase1),
    laterUs: wander.laterUs * swing(tS, wander.laterPeriodS, phase2),
  });
}

/** The two settings of a pulse. */
export interface PulserSetting {
  readonly drivePct: number;
  readonly delayUs: number;
}

/** Inversion over threshold when the switch opens. */
export function inversionOf({ drivePct, delayUs }: PulserSetting, { gain, laterUs }: PulserHidden): number {
  const stored = storedShare(delayUs - laterUs - flashShiftUs(drivePct));
  return plant.fullInversion * gain * (drivePct / 100) * stored;
}

/** mJ that leave for one emptied threshold: less from a hot rod. */
export function outputMJ(drivePct: number): number {
  return plant.thresholdMJ * (1 - plant.heatLoss * (drivePct / 100) ** 2);
}

/** All that a pulse carries, mJ: what an energy meter shows. */
export function totalEnergyMJ(setting: PulserSetting, hidden: PulserHidden): number {
  return outputMJ(setting.drivePct) * energiesAt(inversionOf(setting, hidden)).total;
}

/** Energy in the main pulse less that beside it, mJ: what is wanted of a pulse. */
export function cleanEnergyMJ(setting: PulserSetting, hidden: PulserHidden): number {
  return outputMJ(setting.drivePct) * cleanAt(inversionOf(setting, hidden));
}

export interface BestPulse extends PulserSetting {
  readonly cleanMJ: number;
}

/**
 * The setting with the most clean energy. The delay stores most whatever the drive, since more inversion than is
 * good is had with less drive; the drive by a grid and golden-section search around its best point.
 */
export function bestPulse(hidden: PulserHidden): BestPulse {
  const at = (drivePct: number): PulserSetting => ({
    drivePct,
    delayUs: bestDelayUs + hidden.laterUs + flashShiftUs(drivePct),
  });
  const f = (drivePct: number) => cleanEnergyMJ(at(drivePct), hidden);
  let top = 0;
  for (let drivePct = 1; drivePct <= 100; drivePct += 1) if (f(drivePct) > f(top)) top = drivePct;
  const drivePct = goldenSection(f, Math.max(0, top - 1), Math.min(100, top + 1), 1e-4);
  return { ...at(drivePct), cleanMJ: f(drivePct) };
}
