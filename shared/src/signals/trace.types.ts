/** An array over an even axis: point i stands at `from + i * step`. */
export interface Trace {
  readonly points: ArrayLike<number>;
  readonly from: number;
  /** Distance of two points along the axis; above zero. */
  readonly step: number;
}
