import type { SeekingLawId } from '../../seeking/seeking-laws.js';

/**
 * Over how long the estimates of a law are averaged: its trial, in which the slowest dither has one whole period.
 * Perturb and observe walks to and fro over the best point in four steps, actuator by actuator.
 *
 * @param trialS trial of the law; the discrete law counts it in scans
 * @param scanS nominal time between two scans, s
 * @returns s
 */
export function averagingTimeS(id: SeekingLawId, trialS: number, actuators: number, scanS: number): number {
  if (id === 'perturb-observe') return 4 * actuators * trialS;
  return id === 'discrete' ? trialS * scanS : trialS;
}
