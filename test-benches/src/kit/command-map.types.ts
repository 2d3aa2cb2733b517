/**
 * One value of the model as an ASCII instrument has it. The header is written with its short form in upper
 * case, e.g. `SOURce:DUTY`: `SOUR:DUTY?` asks, `SOURCE:DUTY 41.5` commands, in any case of letters.
 */
export interface CommandField {
  /** Name of the value in the model; a trace is answered as its points, separated by commas. */
  readonly name: string;
  readonly header: string;
  /** Digits after the decimal point of the answer. */
  readonly decimals: number;
  /** Engineering values that a command may have; another is error −222. */
  readonly writeRange?: readonly [min: number, max: number];
  /** As in a register map: faults of instruments pass it by. */
  readonly isOfController?: boolean;
}

/** The commands of a bench, beside the common ones of IEEE 488.2 and SYSTem:ERRor?, SYSTem:VERSion?. */
export interface CommandMap {
  /** Model that `*IDN?` names; the maker is the Brackwater Test Station. */
  readonly model: string;
  readonly fields: readonly CommandField[];
}
