const minus = '\u2212';
const figureSpace = '\u2007';

/** Where a value is missing; as wide as one digit. */
export const missing = '\u2014';

/**
 * A number at fixed decimals with a true minus sign; a dash where there is none.
 *
 * @example
 * formatNumber(-3.14159, 2) // '−3.14'
 */
export function formatNumber(value: number | null | undefined, decimals: number): string {
  if (value === null || value === undefined || !Number.isFinite(value)) return missing;
  const text = Math.abs(value).toFixed(decimals);
  return value < 0 && Number(text) !== 0 ? `${minus}${text}` : text;
}

/**
 * The same, padded so that numbers in a column meet at the decimal point in a font of equal widths.
 *
 * @param integerPlaces places kept before the point, sign included
 * @param fractionPlaces places kept after the point; at least `decimals`
 */
export function alignNumber(
  value: number | null | undefined,
  decimals: number,
  integerPlaces: number,
  fractionPlaces = decimals,
): string {
  const text = formatNumber(value, decimals);
  const point = text.indexOf('.');
  const whole = point < 0 ? text.length : point;
  const tail = text.length - whole;
  const widest = fractionPlaces > 0 ? fractionPlaces + 1 : 0;
  return (
    figureSpace.repeat(Math.max(0, integerPlaces - whole)) +
    text +
    figureSpace.repeat(Math.max(0, widest - tail))
  );
}

/** A number as a person would type it: no more digits than it has, 6 significant at most. */
export function plainNumber(value: number): string {
  return Number(value.toPrecision(6)).toString().replace('-', minus);
}
