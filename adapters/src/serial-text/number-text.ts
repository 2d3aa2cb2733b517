/** How a device writes a number. */
export const numberNotations = ['decimal', 'comma-decimal', 'hex', 'degrees-minutes'] as const;
export type NumberNotation = (typeof numberNotations)[number];

/** Longer texts are no numbers; it also bounds the work on what a broken device sends. */
const mostDigits = 40;

const decimal = /^[+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d{1,4})?$/;
/** IEEE 488.2 writes hexadecimal as #H1F; others as 0x1F or 1F. */
const hexadecimal = /^(?:#[hH]|0[xX])?([0-9a-fA-F]{1,13})$/;

/**
 * The number that a text is, or null where it is none: no part of it is guessed. Infinities and NaN are none.
 *
 * @example
 * parseNumberText('+1.25E-3', 'decimal') // 0.00125
 */
export function parseNumberText(text: string, notation: NumberNotation): number | null {
  if (text.length > mostDigits) return null;
  switch (notation) {
    case 'decimal':
      return parseDecimal(text);
    case 'comma-decimal':
      return text.includes('.') ? null : parseDecimal(text.replace(',', '.'));
    case 'hex': {
      const digits = hexadecimal.exec(text)?.[1];
      return digits === undefined ? null : parseInt(digits, 16);
    }
    case 'degrees-minutes':
      return parseDegreesMinutes(text);
  }
}

function parseDecimal(text: string): number | null {
  if (!decimal.test(text)) return null;
  const value = Number(text);
  return Number.isFinite(value) ? value : null;
}

/** Degrees from dddmm.mmm, the form of NMEA 0183 positions: 4807.038 is 48° 7.038'. */
function parseDegreesMinutes(text: string): number | null {
  if (!/^\d{3,5}(?:\.\d*)?$/.test(text)) return null;
  const value = Number(text);
  const degrees = Math.floor(value / 100);
  const minutes = value - degrees * 100;
  return minutes < 60 ? degrees + minutes / 60 : null;
}

/** How a command writes a number. */
export const writeNotations = ['fixed', 'comma-fixed', 'exponent', 'hex'] as const;
export type WriteNotation = (typeof writeNotations)[number];

/**
 * The number as a command carries it, or why it cannot.
 *
 * @param decimals digits behind the decimal mark
 */
export function formatNumberText(
  value: number,
  notation: WriteNotation,
  decimals: number,
): string | { fault: string } {
  if (!Number.isFinite(value)) return { fault: `${value} is no number that can be sent` };
  switch (notation) {
    case 'fixed':
    case 'comma-fixed': {
      if (Math.abs(value) >= 1e15) return { fault: `${value} has too many digits for this form` };
      const text = withoutMinusZero(value.toFixed(decimals));
      return notation === 'fixed' ? text : text.replace('.', ',');
    }
    case 'exponent':
      return withoutMinusZero(value.toExponential(decimals)).replace('e', 'E');
    case 'hex': {
      const whole = Math.round(value);
      if (whole < 0 || whole > Number.MAX_SAFE_INTEGER) return { fault: `${value} has no hexadecimal form` };
      return whole.toString(16).toUpperCase();
    }
  }
}

/** Some devices take "-0.00" for a fault. */
function withoutMinusZero(text: string): string {
  return text.startsWith('-') && Number(text) === 0 ? text.slice(1) : text;
}
