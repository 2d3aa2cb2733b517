/** Shows what went in so many steps ago. */
export interface DeadTime {
  readonly line: Float64Array;
  at: number;
}

/** @param steps 1 or more @param start what it shows until the first value has come through */
export function createDeadTime(steps: number, start: number): DeadTime {
  return { line: new Float64Array(steps).fill(start), at: 0 };
}

/** @returns what went in as many steps ago as the line is long */
export function passDeadTime(dead: DeadTime, value: number): number {
  const delayed = dead.line[dead.at] as number;
  dead.line[dead.at] = value;
  dead.at = (dead.at + 1) % dead.line.length;
  return delayed;
}
