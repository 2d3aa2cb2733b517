/** Faults that every bench can play; their place here, from 1, is their code in the instructor's register. */
export const commonFaults = {
  nan: 'one value reads as "not a number": nan, or nan.VALUE for another than the usual one',
  exception: 'requests that touch instruments are refused by a device failure (exception 04, error −240)',
  freeze: 'all instruments stand still',
  silence: 'no request is answered or carried out',
  corrupt: 'every answer comes spoiled: wrong CRC, wrong function code, garbled text',
  reboot: 'controller starts anew: silent for 3 s, then commands at rest and watchdog waiting',
  busy: 'every request is refused as busy (exception 06, error −200)',
} as const;

export type CommonFault = keyof typeof commonFaults;

/** How long a controller that starts anew is not to be reached, s of bench time. */
export const rebootS = 3;

/** A fault at a bench time. */
export interface PlannedFault {
  readonly kind: string;
  /** Value that the fault strikes; null for the usual one. */
  readonly of: string | null;
  /** Bench time, s. */
  readonly fromS: number;
  /** Bench time, s; not included. */
  readonly untilS: number;
}

const grammar = /^(?<kind>[a-z-]+)(?:\.(?<of>\w+))?(?:@(?<from>\d+(?:\.\d+)?)(?::(?<for>\d+(?:\.\d+)?))?)?$/;

/**
 * Reads KIND[.VALUE][@FROM[:FOR]], times in s of bench time; left out, it is from the beginning and for ever.
 *
 * @param kinds names of the faults that there are
 * @throws Error that says what is wrong
 * @example parsePlannedFault('nan.co@30:5', ['nan']) // { kind: 'nan', of: 'co', fromS: 30, untilS: 35 }
 */
export function parsePlannedFault(text: string, kinds: readonly string[]): PlannedFault {
  const parts = grammar.exec(text)?.groups;
  if (!parts) throw new Error(`"${text}" is not of the form KIND[.VALUE][@FROM[:FOR]], e.g. freeze@60:5.`);
  const kind = parts['kind'] ?? '';
  if (!kinds.includes(kind)) throw new Error(`There is no fault "${kind}": choose ${kinds.join(', ')}.`);
  const fromS = Number(parts['from'] ?? 0);
  const forS = kind === 'reboot' ? rebootS : Number(parts['for'] ?? Infinity);
  return { kind, of: parts['of'] ?? null, fromS, untilS: fromS + forS };
}
