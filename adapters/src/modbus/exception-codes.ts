/**
 * What a device means by its exception codes.
 *
 * @source MODBUS Application Protocol V1.1b3, 7
 */
const exceptionNames: Readonly<Record<number, string>> = {
  1: 'illegal function',
  2: 'illegal data address',
  3: 'illegal data value',
  4: 'device failure',
  5: 'acknowledge, not ready yet',
  6: 'device busy',
  8: 'memory parity error',
  10: 'gateway path unavailable',
  11: 'gateway target did not respond',
};

/** E.g. `exception 02 (illegal data address)`. */
export function exceptionText(code: number): string {
  const hex = code.toString(16).toUpperCase().padStart(2, '0');
  return `exception ${hex} (${exceptionNames[code] ?? 'not in the standard'})`;
}

/** Codes that can come from one address or value of a joined request: asking singly may succeed. */
export function isAboutContent(code: number): boolean {
  return code >= 1 && code <= 3;
}

/** Codes that say "not now": the same request may succeed a moment later. */
export function isBusy(code: number): boolean {
  return code === 5 || code === 6;
}
