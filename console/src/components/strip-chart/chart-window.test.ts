import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { RingBuffer } from '../../live/ring-buffer.js';
import { chartWindow, extentSince } from './chart-window.js';

function ringOf(values: (number | null)[]): RingBuffer {
  const ring = new RingBuffer(Math.max(1, values.length));
  values.forEach((value, index) => ring.push(index * 10, ['a'], [value]));
  return ring;
}

describe('the window of a chart', () => {
  it('is every row where there are few', () => {
    const rows = chartWindow(ringOf([1, null, 3]), ['a'], { fromMs: 0, toMs: 20, maxPoints: 100 });
    expect(rows).toEqual([
      [0, 0.01, 0.02],
      [1, null, 3],
    ]);
  });

  it('takes one row more on the left and none after its end', () => {
    const [times] = chartWindow(ringOf([1, 2, 3, 4, 5]), ['a'], { fromMs: 20, toMs: 30, maxPoints: 100 });
    expect(times).toEqual([0.01, 0.02, 0.03]);
  });

  it('never loses the least or greatest value by thinning, nor invents one, nor draws many more points', () => {
    const value = fc.double({ min: -1e6, max: 1e6, noNaN: true });
    fc.assert(
      fc.property(
        fc.array(value, { minLength: 1, maxLength: 400 }),
        fc.integer({ min: 4, max: 60 }),
        (values, maxPoints) => {
          const window = { fromMs: 0, toMs: values.length * 10, maxPoints };
          const [times, drawn = []] = chartWindow(ringOf(values), ['a'], window);
          expect(Math.min(...(drawn as number[]))).toBe(Math.min(...values));
          expect(Math.max(...(drawn as number[]))).toBe(Math.max(...values));
          expect(drawn.every((v) => values.includes(v as number))).toBe(true);
          expect(times).toHaveLength(drawn.length);
          expect([...times].sort((a, b) => a - b)).toEqual(times);
          expect(times.length).toBeLessThanOrEqual(2 * maxPoints + 4);
        },
      ),
    );
  });
});

describe('the extent of a column', () => {
  it('looks at the span only and skips what is not good', () => {
    expect(extentSince(ringOf([100, 2, null, 4]), 'a', 10)).toEqual({ least: 2, greatest: 4 });
  });

  it('is nothing where no value is good', () => {
    expect(extentSince(ringOf([null]), 'a', 0)).toBeNull();
  });
});
