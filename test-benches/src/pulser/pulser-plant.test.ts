import { describe, expect, it } from 'vitest';
import { bestDelayUs, flashShiftUs, storedShare } from './lamp-pump.js';
import { bestPulse, cleanEnergyMJ, totalEnergyMJ, wanderingPulser } from './pulser-plant.js';

const still = { gain: 1, laterUs: 0 };
const states = [0.92, 1, 1.08].flatMap((gain) => [-25, 0, 25].map((laterUs) => ({ gain, laterUs })));

describe('the lamp', () => {
  it('has stored most when the flash brings no more than fluorescence takes', () => {
    expect(storedShare(bestDelayUs)).toBe(1);
    for (let us = 0; us < 1000; us += 10) expect(storedShare(us)).toBeLessThanOrEqual(1);
    // Long after the flash the inversion falls by e in a lifetime of 230 µs.
    expect(storedShare(500) / storedShare(730)).toBeCloseTo(Math.E, 2);
  });
});

describe('the best pulse', () => {
  it.each(states)('is better than all others at gain $gain, flash $laterUs µs later', (hidden) => {
    const best = bestPulse(hidden);
    for (let drivePct = 0; drivePct <= 100; drivePct += 2) {
      for (let delayUs = 50; delayUs <= 700; delayUs += 10) {
        // The energies are a table over the inversion; its steps cost less than a hundredth of a mJ.
        expect(cleanEnergyMJ({ drivePct, delayUs }, hidden)).toBeLessThanOrEqual(best.cleanMJ + 0.01);
      }
    }
    expect(best.drivePct).toBeGreaterThan(50);
    expect(best.drivePct).toBeLessThan(80);
  });

  it('is one that energy alone would leave: more drive has far more energy and far less that is clean', () => {
    const best = bestPulse(still);
    const more = { drivePct: best.drivePct + 12, delayUs: best.delayUs + flashShiftUs(62) };
    expect(totalEnergyMJ(more, still)).toBeGreaterThan(1.3 * totalEnergyMJ(best, still));
    expect(cleanEnergyMJ(more, still)).toBeLessThan(0.7 * best.cleanMJ);
  });

  it('drifts as its seed says', () => {
    const [one, other] = [wanderingPulser(1, true), wanderingPulser(2, true)];
    expect(one(0)).not.toEqual(other(0));
    const drives = Array.from({ length: 15 }, (_, i) => bestPulse(one(100 * i)).drivePct);
    expect(Math.max(...drives) - Math.min(...drives)).toBeGreaterThan(6);
    expect(wanderingPulser(1, false)(700)).toEqual(still);
  });
});
