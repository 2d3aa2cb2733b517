import { describe, expect, it } from 'vitest';
import { traceSummary, wholeTrace } from './placed-trace.js';
import { bandOf } from './trace-band.js';

const axis = { title: 'Place', unit: 'mm', from: -5, step: 0.5 };

describe('the summary of a trace', () => {
  it('says how many points, over which axis, how low and how high, and where', () => {
    expect(traceSummary(wholeTrace([1, -2, 8, 3]), axis, 'mV', 1)).toBe(
      '4 points from −5 to −3.5 mm; least −2.0 mV; greatest 8.0 mV at −4 mm.',
    );
  });

  it('of a thinned one is that of the whole', () => {
    const thinned = { points: [0, 9], places: [2, 100], count: 201 };
    expect(traceSummary(thinned, axis, '', 0)).toBe(
      '201 points from −5 to 95 mm; least 0; greatest 9 at 45 mm.',
    );
  });

  it('says where there is nothing', () => {
    expect(traceSummary(wholeTrace([]), axis, 'mV', 1)).toBe('No points.');
  });
});

describe('the band of several traces', () => {
  it('holds the least and the greatest of each stretch, and no number where no point fell', () => {
    const band = bandOf([wholeTrace([1, 2, 3, 4]), wholeTrace([5, 0, 3, 9])], 2);
    expect([...band.low]).toEqual([0, 3]);
    expect([...band.high]).toEqual([5, 9]);
    expect([...bandOf([wholeTrace([7])], 3).low]).toEqual([7, NaN, NaN]);
  });

  it('puts the points of a thinned trace where they stand in the whole', () => {
    const band = bandOf([{ points: [1, 2], places: [0, 10], count: 11 }], 2);
    expect([...band.high]).toEqual([1, 2]);
  });
});
