import { describe, expect, it } from 'vitest';
import { seededRandom } from '../kit/seeded-random.js';
import { restVoltageV, ripple, StringModel, type StringSettings } from './string-model.js';
import { powerPeaks, sectionsOf } from './string-physics.js';
import { weatherOf, withShadow } from './weather.js';

const still: StringSettings = { seed: 3, isNoisy: false, isDrifting: false, profile: 'steady' };

/** A string with a living host, held at a voltage. */
function running(change: Partial<StringSettings> = {}, voltageV = 150): StringModel {
  const model = new StringModel({ ...still, ...change });
  live(model, 3);
  model.write('voltageSetpoint', voltageV);
  live(model, 3);
  return model;
}

/** Lets a host live, and tells of each tenth of a second. */
function live(model: StringModel, forS: number, watch: () => void = () => {}): void {
  const untilS = model.tS + forS;
  while (model.tS < untilS - 1e-9) {
    model.write('heartbeat', model.read('heartbeat') + 1);
    model.advanceTo(model.tS + 0.05);
    watch();
  }
}

describe('the converter', () => {
  it('holds the voltage that it is told, with its ripple about it', () => {
    const model = running();
    const volts: number[] = [];
    live(model, 2, () => volts.push(model.read('voltage')));
    const mean = volts.reduce((sum, value) => sum + value, 0) / volts.length;
    expect(mean).toBeCloseTo(150, 1);
    // Peak of a sine less a ninth of its third harmonic: 10/9 of the amplitude.
    expect(Math.max(...volts) - mean).toBeCloseTo((ripple.amplitudeV * 10) / 9, 0);
  });

  it('shows the power that voltage and current make', () => {
    const model = running();
    live(model, 1, () => {
      expect(model.read('voltage') * model.read('current')).toBeCloseTo(model.read('power'), 6);
    });
  });

  it('refuses voltages that it cannot hold', () => {
    const model = running();
    expect(model.write('voltageSetpoint', 201)).toBe(false);
    expect(model.write('voltageSetpoint', 9)).toBe(false);
    expect(model.read('voltageSetpoint')).toBe(150);
  });

  it('lets go of the string when the heartbeat stops, and comes back at rest', () => {
    const model = running();
    model.advanceTo(model.tS + 2.1);
    expect(model.read('watchdogFlag')).toBe(1);
    expect(model.read('current')).toBe(0);
    expect(model.read('voltageSetpoint')).toBe(restVoltageV);
    expect(model.truth.objective).toBeNull();
    // Open circuit of six warm modules.
    expect(model.read('voltage')).toBeGreaterThan(170);
    live(model, 2);
    expect(model.read('running')).toBe(1);
    expect(model.read('voltageSetpoint')).toBe(restVoltageV);
  });
});

describe('the course', () => {
  it('hangs on seed and writes alone', () => {
    const course = (seed: number, profile: StringSettings['profile']) => {
      const model = running({ seed, profile, isNoisy: true, isDrifting: true });
      const shown: number[] = [];
      live(model, 20, () => shown.push(model.read('power')));
      return shown;
    };
    expect(course(4, 'cloud')).toEqual(course(4, 'cloud'));
    expect(course(4, 'cloud')).not.toEqual(course(5, 'cloud'));
  });

  it('never has more power than the true best, and nearly that at the true best voltage', () => {
    const model = running({ profile: 'cloud' });
    live(model, 60, () => {
      const { objective, bestObjective } = model.truth;
      expect(objective ?? 0).toBeLessThanOrEqual(bestObjective + 1e-6);
    });
    model.write('voltageSetpoint', model.truth.best['voltageSetpoint'] ?? NaN);
    live(model, 1);
    const { objective, bestObjective } = model.truth;
    expect((objective ?? 0) / bestObjective).toBeGreaterThan(0.99);
  });
});

describe('partial shade', () => {
  it.each([1, 2, 3, 4, 5, 6, 7, 8])('with seed %i has two or three peaks', (seed) => {
    const { irradiance, shades } = weatherOf('shade', seededRandom(seed));
    expect(shades.reduce((sum, { modules }) => sum + modules, 0)).toBe(6);
    const peaks = powerPeaks(sectionsOf(irradiance(0), 45, shades));
    expect(peaks.length).toBeGreaterThanOrEqual(2);
    expect(peaks.length).toBeLessThanOrEqual(3);
  });

  it('comes and goes with the shadow that an instructor casts', () => {
    const model = running();
    const before = model.truth.bestObjective;
    model.castShadow(true);
    expect(model.truth.bestObjective).toBeLessThan(0.75 * before);
    model.castShadow(false);
    expect(model.truth.bestObjective).toBeCloseTo(before, 6);
    expect(withShadow([{ share: 1, modules: 1 }])).toEqual([{ share: 0.4, modules: 1 }]);
  });
});
