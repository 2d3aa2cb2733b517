/** One named value of a model. */
export interface RigModelValue {
  readonly name: string;
  /** Unit of the value as the instrument gives it. */
  readonly unit: string;
  readonly isWritable: boolean;
  /** Values per read: 1, or more for a trace. */
  readonly points: number;
}

/**
 * A model of a rig in virtual time: what a bench serves over its wire, and what a rehearsal runs against. Same
 * seed, same writes at the same times: same course.
 */
export interface RigModel {
  readonly values: readonly RigModelValue[];
  /** Virtual time since the model began, s. */
  readonly tS: number;
  /** Goes on to a later time; the past is ignored. @param tS virtual time, s */
  advanceTo(tS: number): void;
  /** What the instrument shows now; NaN where it shows no number. @throws RangeError for an unknown name */
  read(name: string): number;
  /** Points of a trace, owned by the model and overwritten as it goes on. @throws RangeError for no trace */
  readTrace(name: string): Float64Array;
  /** Takes a command as the device would; what it refuses changes nothing. @returns whether it was taken */
  write(name: string, value: number): boolean;
}
