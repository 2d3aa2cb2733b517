/**
 * Play of an actuator: the output follows only once the input has crossed the gap.
 *
 * @source the play operator, e.g. M. A. Krasnosel'skii and A. V. Pokrovskii (1989), "Systems with Hysteresis"
 */
export function createPlay(width: number, at: number): (input: number) => number {
  let output = at;
  return (input) => (output = Math.min(Math.max(output, input - width / 2), input + width / 2));
}

/** Both ways over a map behind a play, begun well below and turned well above the values. */
export function sweep(values: readonly number[], width: number, map: (x: number) => number) {
  const play = createPlay(width, values[0]! - 10 * width - 1);
  const up = values.map((value) => map(play(value)));
  play(values[values.length - 1]! + 10 * width + 1);
  const down = [...values].reverse().map((value) => map(play(value)));
  return { values, up, down: down.reverse() };
}
