import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { Quality } from '../rigs/quality.js';
import { Readings } from './readings.js';
import { tracePointsMax, TraceReading } from './trace-reading.js';

const axis = { from: 0, step: 1 };
const readings = () => new Readings(['o2', 'spectrum'], new Map([['spectrum', axis]]));

describe('a trace among the readings', () => {
  it('keeps its points in single precision, and is no number', () => {
    const scan = readings();
    scan.setTrace(1, [0.1, 2, 3]);
    expect(scan.qualities[1]).toBe(Quality.good);
    expect([...(scan.goodTrace(1)?.points ?? [])]).toEqual([Math.fround(0.1), 2, 3]);
    expect(scan.goodValue(1)).toBeNaN();
  });

  it.each([
    ['no points', []],
    ['a point that is none', [1, NaN, 3]],
    ['an infinite point', [1, Infinity]],
    ['two infinite points that cancel', [Infinity, -Infinity]],
    ['a point beyond single precision', [1, 1e39]],
    ['too many points', new Float64Array(tracePointsMax + 1)],
  ])('is bad with %s, and keeps the points of before', (_name, points) => {
    const scan = readings();
    scan.setTrace(1, [1, 2]);
    scan.setTrace(1, points);
    expect(scan.qualities[1]).toBe(Quality.bad);
    expect(scan.goodTrace(1)).toBeNull();
    expect([...(scan.traces[1]?.points ?? [])]).toEqual([1, 2]);
  });

  it('is bad where the channel is no trace', () => {
    const scan = readings();
    scan.setTrace(0, [1, 2]);
    expect(scan.qualities[0]).toBe(Quality.bad);
    expect(scan.goodTrace(0)).toBeNull();
  });

  it('takes no memory while its length stays, nor when it comes back to one that fitted', () => {
    const trace = new TraceReading(0, 1);
    trace.take(new Float64Array(512).fill(1));
    const { points } = trace;
    trace.take(new Float64Array(512).fill(2));
    expect(trace.points).toBe(points);
    trace.take([1, 2, 3]);
    trace.take(new Float64Array(512).fill(3));
    expect(trace.points.buffer).toBe(points.buffer);
    expect(trace.points).toHaveLength(512);
  });

  it('holds exactly what came last and was good, whatever comes', () => {
    const list = fc.array(fc.float({ noDefaultInfinity: false }), { maxLength: 20 });
    fc.assert(
      fc.property(fc.array(list, { maxLength: 8 }), (scans) => {
        const scan = readings();
        let last: number[] = [];
        for (const points of scans) {
          scan.setTrace(1, points);
          const isGood = points.length > 0 && points.every((p) => Number.isFinite(p));
          if (isGood) last = points;
          expect(scan.qualities[1]).toBe(isGood ? Quality.good : Quality.bad);
          expect([...(scan.traces[1]?.points ?? [])]).toEqual(last);
        }
      }),
    );
  });
});
