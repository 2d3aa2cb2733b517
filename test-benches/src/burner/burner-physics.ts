import { goldenSection } from '../kit/golden-section.js';

/**
 * Combustion of natural gas with excess air, after textbook formulas. The pure map from air trim to
 * efficiency: no time, no lag, no noise. All percentages are 0–100.
 */

/** Constants of a fuel in the Siegert form of the stack loss that uses the oxygen content. */
export interface SiegertConstants {
  a2: number;
  b: number;
}

/** Annex of the German 1. BImSchV, from memory. */
export const naturalGas: SiegertConstants = { a2: 0.66, b: 0.009 };
/** Annex of the German 1. BImSchV, from memory; extra-light fuel oil. */
export const lightOil: SiegertConstants = { a2: 0.68, b: 0.007 };

/** Oxygen in dry air as the Siegert form has it, % by volume; other texts use 20.9 or 20.95. */
const airOxygen = 21;
/** Greatest carbon dioxide content of dry flue gas of natural gas, % by volume (textbook value, from memory). */
const co2Max = 11.8;
/**
 * Loss per share of carbon that leaves as CO, %: heat of combustion of CO over that of methane at net
 * calorific value, 283.0 / 802.3 kJ/mol (from memory). The same form with a coefficient of this size is
 * common practice in flue gas analysis.
 */
const unburntCoefficient = (100 * 283.0) / 802.3;

/** Where CO begins to soar, and how steeply. */
export const coCurve = {
  /** CO of good combustion, ppm. */
  floorPpm: 12,
  /** CO above the floor at the critical excess-air ratio, ppm. */
  atCriticalPpm: 500,
  /** Change of the excess-air ratio that makes CO e times as much. */
  width: 0.018,
  /** No more than this, ppm: the end of the analyser's range. */
  maxPpm: 20_000,
};

/** The critical excess-air ratio about which the bench drifts. */
export const nominalCriticalLambda = 1.1;

/** Combustion air at the burner's intake, °C. */
export const nominalAirTempC = 20;

/**
 * Heat lost by the stack, % of the net heat input: qA = (tA − tL) · (A2 / (21 − O2) + B).
 *
 * @param flueTempC flue gas tA, °C
 * @param airTempC combustion air tL, °C
 * @param o2Pct oxygen in dry flue gas, %, below 21
 * @returns % of heat input; NaN at 21 % oxygen and above, where nothing burns
 * @source Siegert's formula in the form of the 1. BImSchV, annex
 * @example stackLoss(180, 20, 3, naturalGas) // 7.3067
 */
export function stackLoss(
  flueTempC: number,
  airTempC: number,
  o2Pct: number,
  fuel: SiegertConstants = naturalGas,
): number {
  if (!(o2Pct < airOxygen)) return NaN;
  return (flueTempC - airTempC) * (fuel.a2 / (airOxygen - o2Pct) + fuel.b);
}

/**
 * Excess-air ratio at an air trim; the damper's characteristic is taken as linear.
 *
 * @param trimPct damper position, 0–100 % of its span
 */
export function lambdaOfTrim(trimPct: number): number {
  return 0.95 + 0.01 * trimPct;
}

/**
 * Oxygen in dry flue gas at an excess-air ratio: O2 = 21 · (1 − 1/λ), the 21 form; 0 below λ = 1.
 *
 * @example oxygenOfLambda(7 / 6) // 3 (the 20.9 form gives 3 % at λ = 1.1676)
 */
export function oxygenOfLambda(lambda: number): number {
  return Math.max(0, airOxygen * (1 - 1 / lambda));
}

/** Carbon dioxide in dry flue gas, % by volume: the greatest content, thinned by the excess air. */
export function carbonDioxideOfOxygen(o2Pct: number): number {
  return (co2Max * (airOxygen - o2Pct)) / airOxygen;
}

/** CO in dry flue gas, ppm: a floor, and an exponential rise below the critical excess-air ratio (chosen here). */
export function carbonMonoxide(lambda: number, criticalLambda: number): number {
  const rise = coCurve.atCriticalPpm * Math.exp((criticalLambda - lambda) / coCurve.width);
  return Math.min(coCurve.floorPpm + rise, coCurve.maxPpm);
}

/**
 * Heat lost with unburnt CO, % of the net heat input: k · CO / (CO + CO2), both in %. Unburnt hydrogen and
 * hydrocarbons are left out.
 */
export function unburntLoss(coPpm: number, o2Pct: number): number {
  const coPct = coPpm / 10_000;
  const co2Pct = carbonDioxideOfOxygen(o2Pct);
  return (unburntCoefficient * coPct) / (coPct + co2Pct);
}

/** Flue gas temperature, °C: more air carries more heat past the exchanger (slope chosen here). */
export function flueTemperature(lambda: number): number {
  return 165 + 60 * (lambda - nominalCriticalLambda);
}

export interface FlueGas {
  o2Pct: number;
  coPpm: number;
  flueTempC: number;
}

/** The flue gas that an air trim settles to with the flame lit. */
export function flueGasAt(trimPct: number, criticalLambda: number): FlueGas {
  const lambda = lambdaOfTrim(trimPct);
  return {
    o2Pct: oxygenOfLambda(lambda),
    coPpm: carbonMonoxide(lambda, criticalLambda),
    flueTempC: flueTemperature(lambda),
  };
}

/** Combustion efficiency, % of the net heat input: 100 − stack loss − unburnt loss. */
export function efficiencyOf(gas: FlueGas, airTempC: number = nominalAirTempC): number {
  return 100 - stackLoss(gas.flueTempC, airTempC, gas.o2Pct) - unburntLoss(gas.coPpm, gas.o2Pct);
}

export function efficiencyAt(trimPct: number, criticalLambda: number): number {
  return efficiencyOf(flueGasAt(trimPct, criticalLambda));
}

export interface BestTrim {
  trimPct: number;
  efficiencyPct: number;
}

/** The true best air trim, by a grid over the whole span and golden-section search around its best point. */
export function bestTrim(criticalLambda: number): BestTrim {
  const f = (trimPct: number) => efficiencyAt(trimPct, criticalLambda);
  let top = 0;
  for (let trimPct = 1; trimPct <= 100; trimPct += 1) if (f(trimPct) > f(top)) top = trimPct;
  const trimPct = goldenSection(f, Math.max(0, top - 1), Math.min(100, top + 1));
  return { trimPct, efficiencyPct: f(trimPct) };
}
