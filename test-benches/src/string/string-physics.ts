import { goldenSection } from '../kit/golden-section.js';
import { bypassesPerModule, cellsOfModule, cellsPerBypass } from './kc200gt.js';
import {
  maximumPower,
  shortCircuitCurrent,
  voltageAtCurrent,
  type PowerPoint,
  type SingleDiode,
} from './single-diode.js';

/** Modules in series. */
export const modulesInString = 6;

/** Part of a string whose cells all stand in the same light. */
export interface Section {
  cells: SingleDiode;
  /** Short-circuit current of the cells, A: above it the bypass diodes carry the rest. */
  shortCircuitA: number;
  /** Groups of 18 cells with a bypass diode each. */
  groups: number;
}

/** Bypass diode (Schottky, chosen here): 0.43 V at 8 A. */
const bypass = { saturationA: 1e-6, idealityV: 0.027 };
const fixedPointRounds = 4;

/** @param shades share of the irradiance and how many modules get it */
export function sectionsOf(
  irradiance: number,
  cellTempC: number,
  shades: readonly { share: number; modules: number }[],
): Section[] {
  return shades.map(({ share, modules }) => {
    const cells = cellsOfModule(irradiance * share, cellTempC, cellsPerBypass);
    return { cells, shortCircuitA: shortCircuitCurrent(cells), groups: modules * bypassesPerModule };
  });
}

/** Voltage of one group of cells with its bypass diode at a current, V. */
export function groupVoltage({ cells, shortCircuitA }: Section, currentA: number): number {
  if (currentA <= shortCircuitA) return voltageAtCurrent(cells, currentA);
  // Reversed by a fraction of a volt the cells give their short-circuit current and what the shunt leaks.
  let voltageV = 0;
  for (let i = 0; i < fixedPointRounds; i += 1) {
    const bypassedA = Math.max(currentA - shortCircuitA + voltageV / cells.shuntOhm, 0);
    voltageV = -bypass.idealityV * Math.log1p(bypassedA / bypass.saturationA);
  }
  return voltageV;
}

/** Voltage of the string at a current, V. */
export function stringVoltage(sections: readonly Section[], currentA: number): number {
  let voltageV = 0;
  for (const section of sections) voltageV += section.groups * groupVoltage(section, currentA);
  return voltageV;
}

const greatestCurrent = (sections: readonly Section[]) =>
  Math.max(...sections.map((section) => section.shortCircuitA));

/**
 * Current of the string at a voltage, A: the voltage falls with the current, and the root is taken by bisection
 * with the chord (Illinois rule). 0 above the open-circuit voltage: a blocking diode.
 */
export function stringCurrent(sections: readonly Section[], voltageV: number): number {
  let low = 0;
  let high = greatestCurrent(sections);
  let missLow = stringVoltage(sections, low) - voltageV;
  let missHigh = stringVoltage(sections, high) - voltageV;
  if (missLow <= 0) return 0;
  if (missHigh >= 0) return high;
  for (let i = 0, side = 0; i < 100 && high - low > 1e-10; i += 1) {
    // Every third step halves, so that a bend of the curve costs no more than that.
    const share = i % 3 === 2 ? 0.5 : missLow / (missLow - missHigh);
    const current = low + share * (high - low);
    const miss = stringVoltage(sections, current) - voltageV;
    if (Math.abs(miss) < 1e-9) return current;
    if (miss > 0) {
      low = current;
      missLow = miss;
      if (side === 1) missHigh /= 2;
      side = 1;
    } else {
      high = current;
      missHigh = miss;
      if (side === -1) missLow /= 2;
      side = -1;
    }
  }
  return (low + high) / 2;
}

const scanPoints = 120;
/** A. */
const currentTolerance = 1e-6;

/** All points of locally greatest power, best first; several where sections stand in different light. */
export function powerPeaks(sections: readonly Section[]): PowerPoint[] {
  const highestA = greatestCurrent(sections);
  const powerAt = (currentA: number) => currentA * stringVoltage(sections, currentA);
  const powers = Array.from({ length: scanPoints + 1 }, (_, i) => powerAt((highestA * i) / scanPoints));
  const peaks: PowerPoint[] = [];
  for (let i = 1; i < scanPoints; i += 1) {
    const here = powers[i] ?? NaN;
    if (here < (powers[i - 1] ?? NaN) || here <= (powers[i + 1] ?? NaN)) continue;
    const currentA = goldenSection(
      powerAt,
      (highestA * (i - 1)) / scanPoints,
      (highestA * (i + 1)) / scanPoints,
      currentTolerance,
    );
    const voltageV = stringVoltage(sections, currentA);
    peaks.push({ voltageV, currentA, powerW: voltageV * currentA });
  }
  return peaks.sort((a, b) => b.powerW - a.powerW);
}

/** The greatest power to be had; all 0 in the dark. */
export function bestPower(sections: readonly Section[]): PowerPoint {
  const [only, another] = sections;
  if (only && !another) {
    const { voltageV, currentA } = maximumPower(only.cells);
    return { voltageV: voltageV * only.groups, currentA, powerW: voltageV * currentA * only.groups };
  }
  return powerPeaks(sections)[0] ?? { voltageV: 0, currentA: 0, powerW: 0 };
}
