/**
 * The single-diode model of photovoltaic cells: I = IL − I0·(exp((V + I·Rs)/a) − 1) − (V + I·Rs)/Rsh with
 * a = n·Ns·k·T/q. All is solved by the junction voltage Vd = V + I·Rs, in which current and voltage are explicit.
 */
export interface SingleDiode {
  /** IL, A. */
  photocurrentA: number;
  /** I0, A. */
  saturationA: number;
  seriesOhm: number;
  shuntOhm: number;
  /** a = n·Ns·k·T/q, V. */
  idealityV: number;
}

/** Boltzmann constant over elementary charge, V/K; both are exact in the SI of 2019. */
export const boltzmannVPerK = 1.380649e-23 / 1.602176634e-19;

const iterationsMax = 100;
/** From tens of volts down to rounding. */
const halvings = 60;

/** Current of the cells at a junction voltage, A. */
export function currentAtJunction(cells: SingleDiode, junctionV: number): number {
  const { photocurrentA, saturationA, shuntOhm, idealityV } = cells;
  return photocurrentA - saturationA * Math.expm1(junctionV / idealityV) - junctionV / shuntOhm;
}

/** Change of the current with the junction voltage, A/V; always below 0. */
function slopeAtJunction({ saturationA, shuntOhm, idealityV }: SingleDiode, junctionV: number): number {
  return -(saturationA / idealityV) * Math.exp(junctionV / idealityV) - 1 / shuntOhm;
}

/**
 * Junction voltage at which the cells carry a current, V. The current falls and bends downward, so that Newton's
 * rule comes down from the diode's own voltage without the shunt, which is too high, and never passes the root.
 *
 * @param currentA up to the photocurrent
 */
export function junctionAtCurrent(cells: SingleDiode, currentA: number): number {
  const { photocurrentA, saturationA, idealityV } = cells;
  const left = Math.max(photocurrentA - currentA, 0);
  let junctionV = idealityV * Math.log1p(left / saturationA);
  for (let i = 0; i < iterationsMax; i += 1) {
    const change = (currentAtJunction(cells, junctionV) - currentA) / slopeAtJunction(cells, junctionV);
    junctionV -= change;
    if (Math.abs(change) <= 1e-14 * Math.abs(junctionV) + 1e-15) break;
  }
  return junctionV;
}

/** Terminal voltage at a current, V; below 0 above the short-circuit current. */
export function voltageAtCurrent(cells: SingleDiode, currentA: number): number {
  return junctionAtCurrent(cells, currentA) - currentA * cells.seriesOhm;
}

/** Current at a terminal voltage of 0 or above, A. */
export function currentAtVoltage(cells: SingleDiode, voltageV: number): number {
  const { photocurrentA, seriesOhm } = cells;
  let junctionV = voltageV + seriesOhm * photocurrentA;
  for (let i = 0; i < iterationsMax; i += 1) {
    const miss = junctionV - seriesOhm * currentAtJunction(cells, junctionV) - voltageV;
    const change = miss / (1 - seriesOhm * slopeAtJunction(cells, junctionV));
    junctionV -= change;
    if (Math.abs(change) <= 1e-14 * Math.abs(junctionV) + 1e-15) break;
  }
  return currentAtJunction(cells, junctionV);
}

export const openCircuitVoltage = (cells: SingleDiode): number => junctionAtCurrent(cells, 0);
export const shortCircuitCurrent = (cells: SingleDiode): number => currentAtVoltage(cells, 0);

export interface PowerPoint {
  voltageV: number;
  currentA: number;
  powerW: number;
}

/**
 * The point of greatest power: where dP/dVd = I·dV/dVd + V·dI/dVd is 0, which it falls through once between
 * short circuit and open circuit; by bisection.
 */
export function maximumPower(cells: SingleDiode): PowerPoint {
  const { seriesOhm } = cells;
  let low = seriesOhm * shortCircuitCurrent(cells);
  let high = openCircuitVoltage(cells);
  const at = (junctionV: number) => {
    const currentA = currentAtJunction(cells, junctionV);
    return { currentA, voltageV: junctionV - seriesOhm * currentA };
  };
  for (let i = 0; i < halvings; i += 1) {
    const middle = (low + high) / 2;
    const { currentA, voltageV } = at(middle);
    const slope = slopeAtJunction(cells, middle);
    if (currentA * (1 - seriesOhm * slope) + voltageV * slope > 0) low = middle;
    else high = middle;
  }
  const { currentA, voltageV } = at((low + high) / 2);
  return { voltageV, currentA, powerW: voltageV * currentA };
}
