import type { Conversion } from './calibration.schema.js';
import { emfOf, temperatureOf } from './its-90.js';
import { platinumTemperature } from './platinum-resistance.js';

/**
 * A conversion made ready for the scan.
 *
 * @param raw what the adapter brought
 * @param coldJunctionC temperature of the cold junction, °C; used by thermocouples only
 * @returns the value; NaN where `raw` is outside what the conversion covers
 * @realtime safe: allocates nothing
 */
export type Convert = (raw: number, coldJunctionC: number) => number;

/**
 * @returns a function that converts raw values
 * @example compileConversion({ kind: 'linear', gain: 2, offset: 1 })(3, NaN) // 7
 */
export function compileConversion(conversion: Conversion): Convert {
  switch (conversion.kind) {
    case 'linear':
      return (raw) => conversion.gain * raw + conversion.offset;
    case 'polynomial':
      return polynomial(conversion.coefficients, conversion.from, conversion.to);
    case 'table':
      return table(conversion.points);
    case 'thermocouple':
      return (raw, coldJunctionC) =>
        temperatureOf(conversion.type, raw + emfOf(conversion.type, coldJunctionC));
    case 'platinum':
      return (raw) => platinumTemperature(raw, conversion.r0Ohm);
  }
}

function polynomial(coefficients: readonly number[], from: number, to: number): Convert {
  return (raw) => {
    if (!(raw >= from && raw <= to)) return NaN;
    let sum = 0;
    for (let i = coefficients.length - 1; i >= 0; i -= 1) sum = sum * raw + (coefficients[i] ?? 0);
    return sum;
  };
}

function table(points: readonly { raw: number; value: number }[]): Convert {
  const raws = Float64Array.from(points, (point) => point.raw);
  const values = Float64Array.from(points, (point) => point.value);
  const last = raws.length - 1;
  return (raw) => {
    if (!(raw >= (raws[0] ?? NaN) && raw <= (raws[last] ?? NaN))) return NaN;
    let low = 0;
    let high = last;
    while (high - low > 1) {
      const middle = (low + high) >>> 1;
      if ((raws[middle] ?? NaN) <= raw) low = middle;
      else high = middle;
    }
    const share = (raw - (raws[low] ?? NaN)) / ((raws[high] ?? NaN) - (raws[low] ?? NaN));
    return (values[low] ?? NaN) * (1 - share) + (values[high] ?? NaN) * share;
  };
}
