import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { RingBuffer } from './ring-buffer.js';

describe('a ring buffer', () => {
  it('holds the last rows of any sequence, as a plain array cut to its capacity does', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 1, max: 17 }),
        fc.array(fc.tuple(fc.integer({ min: 0, max: 50 }), fc.double({ noNaN: true })), { maxLength: 60 }),
        (capacity, steps) => {
          const ring = new RingBuffer(capacity);
          const plain: [number, number][] = [];
          let time = 0;
          for (const [wait, value] of steps) {
            time += wait;
            ring.push(time, ['a'], [value]);
            plain.push([time, value]);
          }
          const kept = plain.slice(-capacity);
          expect(ring.length).toBe(kept.length);
          kept.forEach(([t, value], index) => {
            expect(ring.timeAt(index)).toBe(t);
            expect(ring.valueAt('a', index)).toBe(value);
          });
          const probe = time / 2;
          expect(ring.firstAtOrAfter(probe)).toBe(kept.filter(([t]) => t < probe).length);
        },
      ),
    );
  });

  it('knows no value before a column began and none in a row without it', () => {
    const ring = new RingBuffer(4);
    ring.push(1, ['a'], [10]);
    ring.push(2, ['a', 'b'], [11, 20]);
    ring.push(3, ['b'], [21]);
    expect(ring.valueAt('b', 0)).toBeNaN();
    expect(ring.latest('a')).toBeNaN();
    expect(ring.latest('b')).toBe(21);
  });

  it('does not bring an old value back when the ring has gone round', () => {
    const ring = new RingBuffer(2);
    ring.push(1, ['a', 'b'], [1, 1]);
    ring.push(2, ['a'], [2]);
    ring.push(3, ['a'], [3]);
    expect(ring.valueAt('b', 0)).toBeNaN();
    expect(ring.valueAt('b', 1)).toBeNaN();
  });

  it('leaves out a row whose time goes backwards', () => {
    const ring = new RingBuffer(4);
    ring.push(5, ['a'], [1]);
    ring.push(4, ['a'], [2]);
    expect(ring.length).toBe(1);
    expect(ring.latest('a')).toBe(1);
  });
});
