import { describe, expect, it } from 'vitest';
import { noiseSigma } from './burner-model.js';
import { BurnerSimulation } from './burner-simulation.js';
import { seededRandom } from '../kit/seeded-random.js';

const options = { seed: 7, isNoisy: true, isDrifting: false };

/** A simulation with a living host, settled at its rest position at bench time 20 s. */
function warm(overrides: Partial<typeof options> = {}): BurnerSimulation {
  const simulation = new BurnerSimulation({ ...options, ...overrides });
  course(simulation, 0, 20);
  return simulation;
}

type Shown = Record<string, number>;

function readingsOf(simulation: BurnerSimulation): Shown {
  return Object.fromEntries(simulation.values.map(({ name }) => [name, simulation.read(name)]));
}

/** Lets a host live from one bench time to another, s, and collects what the instruments show. */
function course(simulation: BurnerSimulation, fromS: number, toS: number): Shown[] {
  const shown: Shown[] = [];
  for (let i = Math.round(fromS * 100) + 1; i <= Math.round(toS * 100); i += 1) {
    simulation.advanceTo(i / 100);
    simulation.write('heartbeat', i & 0xffff);
    shown.push(readingsOf(simulation));
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
    const quiet = readingsOf(warm({ isNoisy: false }));
    const shown = course(simulation, 20, 60);
    const o2 = shown.map((readings) => readings['o2'] ?? NaN);
    // 4000 samples: the standard error of the deviation is 1.1 %, of the mean 0.0003 %.
    expect(deviation(o2) / noiseSigma.o2Pct).toBeCloseTo(1, 1);
    expect(Math.abs(mean(o2) - (quiet['o2'] ?? NaN))).toBeLessThan((4 * noiseSigma.o2Pct) / Math.sqrt(4000));
    const temperatures = shown.map((readings) => readings['flueTemp'] ?? NaN);
    expect(deviation(temperatures) / noiseSigma.flueTempC).toBeCloseTo(1, 1);
  });

  it('repeats itself for the same seed and differs for another', () => {
    expect(readingsOf(warm())).toEqual(readingsOf(warm()));
    expect(readingsOf(warm({ seed: 8 }))).not.toEqual(readingsOf(warm()));
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

describe('a restart of the controller', () => {
  it('leaves the flame out and the damper at rest until heartbeats and a command come', () => {
    const simulation = warm();
    simulation.write('airTrim', 40);
    course(simulation, 20, 30);
    simulation.reboot();
    simulation.advanceTo(40);
    expect(readingsOf(simulation)).toMatchObject({
      airTrim: 70,
      flame: 0,
      watchdogFlag: 1,
      watchdogCount: 0,
    });
    expect(simulation.truth).toMatchObject({ loss: null, at: { airTrim: 70 } });
    course(simulation, 40, 42);
    expect(readingsOf(simulation)).toMatchObject({ airTrim: 70, flame: 1, watchdogFlag: 0 });
  });
});
