import { describe, expect, it } from 'vitest';
import type { Telemetry } from '@cresthold/shared';
import { SampleStore } from './sample-store.js';

const batch = (sequence: number, rows: [number, number | null][]): Telemetry => ({
  rigId: 'burner-1',
  runId: null,
  sequence,
  columns: ['o2'],
  rows: rows.map(([atMs, value]) => ({ atMs, tS: null, values: [value] })),
});

function storeWithFrames() {
  const frames: (() => void)[] = [];
  const store = new SampleStore((callback) => frames.push(callback));
  const nextFrame = () => frames.splice(0).forEach((callback) => callback());
  return { samples: store.of('burner-1'), nextFrame };
}

describe('the sample store', () => {
  it('tells its readers once per frame, however many batches came', () => {
    const { samples, nextFrame } = storeWithFrames();
    let calls = 0;
    samples.subscribe(() => (calls += 1));
    samples.take(batch(1, [[100, 3]]), 0);
    samples.take(batch(2, [[150, 4]]), 0);
    expect(calls).toBe(0);
    nextFrame();
    expect(calls).toBe(1);
    expect(samples.ring.latest('o2')).toBe(4);
  });

  it('breaks the line where batches were lost, and counts them', () => {
    const { samples } = storeWithFrames();
    samples.take(batch(1, [[100, 3]]), 0);
    samples.take(batch(4, [[300, 5]]), 0);
    expect(samples.lostBatches).toBe(2);
    expect([0, 1, 2].map((row) => samples.ring.valueAt('o2', row))).toEqual([3, NaN, 5]);
  });

  it('keeps a reading that was not good as no value', () => {
    const { samples } = storeWithFrames();
    samples.take(batch(1, [[100, null]]), 0);
    expect(samples.ring.latest('o2')).toBeNaN();
  });
});
