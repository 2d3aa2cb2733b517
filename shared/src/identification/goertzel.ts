import { checkSeries } from '../signals/check-settings.js';

/**
 * One bin of the discrete Fourier transform, Σ x_n·e^(−2πi·bin·n/N); the bin need not be whole.
 *
 * @param values N samples, any unit
 * @param bin periods in the record; 0 to N/2. Close to 0 with many samples the recursion loses digits: use
 * `fourierTransform` there.
 * @throws analysis.invalid-input, analysis.too-little-data
 * @source G. Goertzel (1958), "An algorithm for the evaluation of finite trigonometric series", American
 * Mathematical Monthly 65:34–35
 * @realtime safe: one pass, allocates one small object
 * @example
 * goertzel([1, 2, 3, 4], 0) // { re: 10, im: 0 }
 */
export function goertzel(values: ArrayLike<number>, bin: number): { re: number; im: number } {
  checkSeries(values, 'values');
  const angle = (2 * Math.PI * bin) / values.length;
  const factor = 2 * Math.cos(angle);
  let last = 0;
  let before = 0;
  for (let i = 0; i < values.length; i += 1) {
    const next = values[i]! + factor * last - before;
    before = last;
    last = next;
  }
  const re = last - Math.cos(angle) * before;
  const im = Math.sin(angle) * before;
  const turn = angle * (values.length - 1);
  return {
    re: re * Math.cos(turn) + im * Math.sin(turn),
    im: im * Math.cos(turn) - re * Math.sin(turn),
  };
}
