/**
 * Coefficients of the Callendar–Van Dusen equation for industrial platinum sensors.
 *
 * @source IEC 60751:2008
 */
const a = 3.9083e-3;
const b = -5.775e-7;
const c = -4.183e-12;

/** Range of the standard, °C. */
export const platinumRangeC = { from: -200, to: 850 } as const;

/**
 * Resistance of an industrial platinum sensor.
 *
 * @param celsius temperature, °C
 * @param r0Ohm resistance at 0 °C, ohm: 100 for a Pt100
 * @returns ohm; NaN outside −200 to 850 °C
 * @source IEC 60751:2008
 * @example platinumResistance(100, 100) // 138.5055
 */
export function platinumResistance(celsius: number, r0Ohm: number): number {
  if (!(celsius >= platinumRangeC.from && celsius <= platinumRangeC.to)) return NaN;
  const below = celsius < 0 ? c * (celsius - 100) * celsius ** 3 : 0;
  return r0Ohm * (1 + a * celsius + b * celsius ** 2 + below);
}

/**
 * Temperature of an industrial platinum sensor: the quadratic above 0 °C, Newton's steps on the full equation
 * below.
 *
 * @param ohm resistance, ohm
 * @param r0Ohm resistance at 0 °C, ohm
 * @returns °C; NaN outside −200 to 850 °C
 * @source IEC 60751:2008
 * @realtime safe: allocates nothing
 * @example platinumTemperature(138.5055, 100) // 100.000
 */
export function platinumTemperature(ohm: number, r0Ohm: number): number {
  const ratio = ohm / r0Ohm;
  let t = (-a + Math.sqrt(a * a - 4 * b * (1 - ratio))) / (2 * b);
  if (ratio < 1) {
    for (let step = 0; step < 8; step += 1) {
      const miss = 1 + a * t + b * t * t + c * (t - 100) * t ** 3 - ratio;
      t -= miss / (a + 2 * b * t + c * (4 * t - 300) * t * t);
    }
  }
  // A hundredth of a microkelvin for rounding at the ends of the range.
  const isInside = t >= platinumRangeC.from - 1e-8 && t <= platinumRangeC.to + 1e-8;
  return isInside ? t : NaN;
}
