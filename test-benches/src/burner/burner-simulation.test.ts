import { describe, expect, it } from 'vitest';
import { noiseSigma } from './burner-model.js';
import { BurnerFault, BurnerSimulation, type BurnerReadings } from './burner-simulation.js';
import { seededRandom } from '../kit/seeded-random.js';

const options = { seed: 7, isNoisy: true, isDrifting: false };

/** A simulation with a living host, settled at its rest position at bench time 20 s. */
function warm(overrides: Partial<typeof options> = {}): BurnerSimulation {
  const simulation = new BurnerSimulation({ ...options, ...overrides });
  course(simulation, 0, 20);
  return simulation;
}

/** Lets a host live from one bench time to another, s, and collects what the instruments show. */
function course(simulation: BurnerSimulation, fromS: number, toS: number): BurnerReadings[] {
  const shown: BurnerReadings[] = [];
  for (let i = Math.round(fromS * 100) + 1; i <= Math.round(toS * 100); i += 1) {
    simulation.advanceTo(i / 100 + 1e-6);
    simulation.writeHeartbeat(i & 0xffff);
    shown.push(simulation.readings);
  }
  return shown;
}

const mean = (values: number[]) => values.reduce((sum, value) => sum + value, 0) / values.length;
const deviation = (values: number[]) => {
  const middle = mean(values);
  return Math.sqrt(values.reduce((sum, value) => sum + (value - middle) ** 2, 0) / (values.length - 1));
};

describe('the noise', () => {
  it('has the stated deviation and no bias', () => {
    const simulation = warm();
    const quiet = warm({ isNoisy: false }).readings;
    const shown = course(simulation, 20, 60);
    const o2 = shown.map((readings) => readings.o2Pct);
    // 4000 samples: the standard error of the deviation is 1.1 %, of the mean 0.0003 %.
    expect(deviation(o2) / noiseSigma.o2Pct).toBeCloseTo(1, 1);
    expect(Math.abs(mean(o2) - quiet.o2Pct)).toBeLessThan((4 * noiseSigma.o2Pct) / Math.sqrt(4000));
    const temperatures = shown.map((readings) => readings.flueTempC);
    expect(deviation(temperatures) / noiseSigma.flueTempC).toBeCloseTo(1, 1);
  });

  it('repeats itself for the same seed and differs for another', () => {
    expect(warm().readings).toEqual(warm().readings);
    expect(warm({ seed: 8 }).readings).not.toEqual(warm().readings);
  });
});

describe('the seeded generator', () => {
  it('draws evenly and normally', () => {
    const random = seededRandom(1);
    const even = Array.from({ length: 20_000 }, () => random.uniform());
    expect(mean(even)).toBeCloseTo(0.5, 2);
    expect(deviation(even)).toBeCloseTo(Math.sqrt(1 / 12), 2);
    const normal = Array.from({ length: 20_000 }, () => random.normal());
    expect(mean(normal)).toBeCloseTo(0, 1);
    expect(deviation(normal)).toBeCloseTo(1, 1);
    // Share within one standard deviation: 68.27 %.
    expect(normal.filter((x) => Math.abs(x) < 1).length / normal.length).toBeCloseTo(0.6827, 1);
  });
});

describe('the instruments', () => {
  it('keep what they showed while they are frozen', () => {
    const simulation = warm();
    simulation.fault = BurnerFault.frozen;
    simulation.writeTrim(30);
    const frozen = simulation.readings;
    course(simulation, 20, 30);
    expect(simulation.readings).toEqual(frozen);
    expect(simulation.now.damperPct).toBeCloseTo(30, 9);
    simulation.fault = BurnerFault.none;
    course(simulation, 30, 30.1);
    expect(simulation.readings.damperPct).toBeCloseTo(30, 9);
  });

  it('tell of every trip of the watchdog', () => {
    const simulation = warm();
    const told: [boolean, number][] = [];
    simulation.onWatchdog = (isTripped, count) => told.push([isTripped, count]);
    simulation.advanceTo(30);
    course(simulation, 30, 32);
    expect(told).toEqual([
      [true, 1],
      [false, 1],
    ]);
    expect(simulation.truth.efficiencyPct).toBeGreaterThan(80);
  });
});
