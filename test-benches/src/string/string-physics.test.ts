import { describe, expect, it } from 'vitest';
import { cellsOfModule, kc200gt } from './kc200gt.js';
import {
  boltzmannVPerK,
  currentAtVoltage,
  maximumPower,
  openCircuitVoltage,
  shortCircuitCurrent,
  voltageAtCurrent,
  type SingleDiode,
} from './single-diode.js';
import { bestPower, powerPeaks, sectionsOf, stringCurrent, stringVoltage } from './string-physics.js';

describe('the single-diode solver', () => {
  it('meets the first of the high-precision curves to ten digits', () => {
    // Curve 1 of precise_iv_curves1.json in the tests of pvlib-python (BSD-3): 72 cells at 25 °C, IL = 1 A,
    // I0 = 5e-10 A, Rs = 0.1 Ω, Rsh = 300 Ω, n = 1.01.
    const cells: SingleDiode = {
      photocurrentA: 1,
      saturationA: 5e-10,
      seriesOhm: 0.1,
      shuntOhm: 300,
      idealityV: 1.01 * 72 * boltzmannVPerK * 298.15,
    };
    expect(openCircuitVoltage(cells)).toBeCloseTo(39.7481073798697, 9);
    expect(shortCircuitCurrent(cells)).toBeCloseTo(0.999666777713281, 12);
    const best = maximumPower(cells);
    expect(best.voltageV).toBeCloseTo(33.9368943154556, 6);
    expect(best.currentA).toBeCloseTo(0.84612386091448, 7);
    expect(best.powerW).toBeCloseTo(28.7148160456399, 11);
  });

  it('meets the four points that a module was fitted to', () => {
    // W. De Soto, S. A. Klein and W. A. Beckman (2006), Solar Energy 80:78–88, as fitted in pvlib-python's
    // test_desoto.py: Voc 38.3 V, Isc 9.43 A, Vmp 31.0 V, Imp 8.71 A give these parameters to 1e-4.
    const cells: SingleDiode = {
      photocurrentA: 9.45232,
      saturationA: 3.2246e-10,
      seriesOhm: 0.297814,
      shuntOhm: 125.798,
      idealityV: 1.59128,
    };
    expect(openCircuitVoltage(cells) / 38.3).toBeCloseTo(1, 4);
    expect(shortCircuitCurrent(cells) / 9.43).toBeCloseTo(1, 4);
    const best = maximumPower(cells);
    expect(best.voltageV / 31).toBeCloseTo(1, 3);
    expect(best.currentA / 8.71).toBeCloseTo(1, 3);
    expect(best.powerW / (31 * 8.71)).toBeCloseTo(1, 4);
  });

  it('finds voltage and current as each other’s inverse', () => {
    const cells = cellsOfModule(620, 41, 54);
    for (const voltageV of [0, 5, 20, 25, 29]) {
      expect(voltageAtCurrent(cells, currentAtVoltage(cells, voltageV))).toBeCloseTo(voltageV, 9);
    }
  });
});

describe('the module', () => {
  // M. G. Villalva, J. R. Gazoli and E. R. Filho (2009), IEEE Trans. Power Electronics 24:1198–1208, table II
  // (from memory): Isc 8.21 A, Voc 32.9 V, Pmax 200.143 W at 26.3 V; I0 9.825e-8 A, Ipv 8.214 A.
  const cells = cellsOfModule(1000, 25, kc200gt.cells);

  it('has the parameters of its paper', () => {
    expect(cells.saturationA / 9.825e-8).toBeCloseTo(1, 3);
    expect(cells.photocurrentA).toBeCloseTo(8.214, 3);
    expect(openCircuitVoltage(cells)).toBeCloseTo(32.9, 1);
    expect(shortCircuitCurrent(cells)).toBeCloseTo(8.21, 5);
  });

  it('gives the greatest power of its paper, at its voltage within 0.3 %', () => {
    const best = maximumPower(cells);
    expect(best.powerW).toBeCloseTo(200.14, 1);
    expect(best.voltageV / 26.3).toBeCloseTo(1, 2);
    expect(Math.abs(best.voltageV / 26.3 - 1)).toBeLessThan(0.003);
  });

  it('heats up as its equations say', () => {
    // Equation 7 of the paper at 75 °C, recomputed.
    expect(cellsOfModule(1000, 75, 54).saturationA / 2.5506e-5).toBeCloseTo(1, 3);
    expect(maximumPower(cellsOfModule(1000, 75, 54)).powerW).toBeLessThan(165);
  });
});

describe('the string', () => {
  const even = sectionsOf(1000, 25, [{ share: 1, modules: 6 }]);
  const shaded = sectionsOf(1000, 25, [
    { share: 1, modules: 4 },
    { share: 0.35, modules: 2 },
  ]);

  it('in even light is six modules, with one peak', () => {
    const module = maximumPower(cellsOfModule(1000, 25, 54));
    const peaks = powerPeaks(even);
    expect(peaks).toHaveLength(1);
    expect(peaks[0]?.powerW).toBeCloseTo(6 * module.powerW, 6);
    expect(peaks[0]?.voltageV).toBeCloseTo(6 * module.voltageV, 2);
  });

  it('in partial shade has a peak for each light, near four modules and near all six', () => {
    const peaks = powerPeaks(shaded);
    expect(peaks).toHaveLength(2);
    // The four in the light, less 0.43 V for each of the six bypass diodes.
    expect(peaks[0]?.voltageV).toBeGreaterThan(4 * 26.3 - 6);
    expect(peaks[0]?.voltageV).toBeLessThan(4 * 26.3);
    expect(peaks[1]?.currentA).toBeLessThan(0.35 * 8.21);
    expect(peaks[1]?.voltageV).toBeGreaterThan(6 * 26.3);
  });

  it('carries at each voltage the current whose voltage that is', () => {
    for (let voltageV = 2; voltageV < 190; voltageV += 7) {
      const currentA = stringCurrent(shaded, voltageV);
      if (currentA > 0) expect(stringVoltage(shaded, currentA)).toBeCloseTo(voltageV, 6);
    }
    expect(stringCurrent(shaded, 220)).toBe(0);
    expect(stringCurrent(sectionsOf(0, 25, [{ share: 1, modules: 6 }]), 50)).toBe(0);
  });

  it('knows its best point better than any other does', () => {
    for (const sections of [even, shaded]) {
      const best = bestPower(sections);
      for (let v = 1; v < 200; v += 0.5) {
        expect(v * stringCurrent(sections, v)).toBeLessThanOrEqual(best.powerW + 1e-3);
      }
    }
  });
});
