/** One line of a chart. */
export interface ChartTrace {
  /** Column of the samples, e.g. `o2`, `airTrim.applied`. */
  column: string;
  label: string;
  unit: string;
  decimals: number;
  /** Place in the set of trace colours. */
  colour: number;
  isDashed?: boolean;
}

/** A level drawn across a chart. */
export interface ChartLevel {
  value: number;
  /** Short: it is written on the line. */
  label: string;
}

/** A range of the value axis. */
export interface ChartRange {
  min: number;
  max: number;
}
