import { boltzmannVPerK, type SingleDiode } from './single-diode.js';

const standardK = 298.15;
const standardIrradiance = 1000;

/**
 * A polycrystalline module of 54 cells and 200 W, the worked example of M. G. Villalva, J. R. Gazoli and E. R.
 * Filho (2009), "Comprehensive approach to modeling and simulation of photovoltaic arrays", IEEE Transactions on
 * Power Electronics 24:1198–1208, tables I and II (from memory).
 */
export const kc200gt = {
  cells: 54,
  shortCircuitA: 8.21,
  openCircuitV: 32.9,
  /** Change of the open-circuit voltage, V/K. */
  voltagePerK: -0.123,
  /** Change of the short-circuit current, A/K. */
  currentPerK: 0.0032,
  ideality: 1.3,
  seriesOhm: 0.221,
  shuntOhm: 415.405,
} as const;

/** Cells in series behind one bypass diode: a third of the module. */
export const cellsPerBypass = 18;
export const bypassesPerModule = kc200gt.cells / cellsPerBypass;

/**
 * Cells of the module in series at irradiance and temperature, after equations 4 and 7 of the paper: saturation
 * current from the open-circuit voltage, photocurrent in proportion to the irradiance.
 *
 * @param irradiance W/m², 0 or above
 * @param cellTempC °C
 * @param cells how many of the 54 are in series
 * @example cellsOfModule(1000, 25, 54).saturationA // 9.8252e-8
 */
export function cellsOfModule(irradiance: number, cellTempC: number, cells: number): SingleDiode {
  const above = cellTempC + 273.15 - standardK;
  const idealityV = kc200gt.ideality * kc200gt.cells * boltzmannVPerK * (cellTempC + 273.15);
  const shortCircuitA = kc200gt.shortCircuitA + kc200gt.currentPerK * above;
  const openCircuitV = kc200gt.openCircuitV + kc200gt.voltagePerK * above;
  const standardPhotocurrentA =
    (kc200gt.shortCircuitA * (kc200gt.shuntOhm + kc200gt.seriesOhm)) / kc200gt.shuntOhm;
  const share = cells / kc200gt.cells;
  return {
    photocurrentA: (standardPhotocurrentA + kc200gt.currentPerK * above) * (irradiance / standardIrradiance),
    saturationA: shortCircuitA / Math.expm1(openCircuitV / idealityV),
    seriesOhm: kc200gt.seriesOhm * share,
    shuntOhm: kc200gt.shuntOhm * share,
    idealityV: idealityV * share,
  };
}
