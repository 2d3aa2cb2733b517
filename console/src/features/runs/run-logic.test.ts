import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { RunEvent } from '@cresthold/shared';
import { appendEvent } from './api/follow-run.js';
import { chartRows } from './charts/chart-rows.js';
import { roundScale } from '../../components/index.js';
import { seekBeganS, seekPath, surveyPoints } from './landscape/landscape-points.js';

const event = (sequence: number, body: RunEvent['body'], tS = sequence): RunEvent => ({
  sequence,
  tS,
  at: '2026-03-01T10:00:00.000Z',
  body,
});
const resumed = (sequence: number) => event(sequence, { type: 'run.resumed', by: 'technician' });

describe('events of a run that come live', () => {
  it('go to the end of the list once', () => {
    const events = [resumed(1), resumed(2)];
    expect(appendEvent(events, resumed(3))).toHaveLength(3);
    expect(appendEvent(events, resumed(2))).toBe(events);
  });

  it('say that the list must be read anew where one is missing', () => {
    expect(appendEvent([resumed(1)], resumed(3))).toBeNull();
    expect(appendEvent([], resumed(2))).toBeNull();
  });
});

describe('rows of a recorded chart', () => {
  const samples = {
    columns: ['o2', 'co'],
    isExact: false,
    tS: [0, 10],
    mean: [
      [2, 3],
      [50, null],
    ],
    min: [
      [1, 2],
      [40, null],
    ],
    max: [
      [5, 4],
      [60, null],
    ],
  };

  it('are the samples themselves where these are exact', () => {
    expect(chartRows({ ...samples, isExact: true }, ['co', 'o2'])).toEqual({
      timesS: [0, 10],
      values: [
        [50, null],
        [2, 3],
      ],
    });
  });

  it('are the least and the greatest value of each bucket, so that no spike is lost', () => {
    expect(chartRows(samples, ['o2'])).toEqual({ timesS: [0, 5, 10, 15], values: [[1, 5, 2, 4]] });
  });

  it('are empty for a column that the answer has not', () => {
    expect(chartRows({ ...samples, isExact: true }, ['flame']).values).toEqual([[]]);
  });
});

describe('the scale of the landscape', () => {
  it('puts round ticks inside and every value between its ends', () => {
    expect(roundScale([0, 10], 5).ticks).toEqual([0, 2, 4, 6, 8, 10]);
    fc.assert(
      fc.property(
        fc.array(fc.double({ min: -1e6, max: 1e6, noNaN: true }), { minLength: 1, maxLength: 20 }),
        (values) => {
          const scale = roundScale(values, 5);
          for (const value of values) {
            expect(scale.at(value)).toBeGreaterThanOrEqual(0);
            expect(scale.at(value)).toBeLessThanOrEqual(1);
          }
          expect(scale.ticks.length).toBeLessThan(15);
          for (const tick of scale.ticks) expect(scale.at(tick)).toBeGreaterThanOrEqual(-1e-9);
        },
      ),
    );
  });
});

describe('the landscape', () => {
  const point = (sequence: number, value: number, objective: number | null): RunEvent =>
    event(sequence, {
      type: 'survey.point-measured',
      step: 'survey',
      actuator: 'airTrim',
      value,
      objective,
      standardError: 0.1,
      branch: 'up',
      isValid: true,
    });

  it('takes the measured points of its actuator and leaves out what was no number', () => {
    const events = [point(1, 10, 90), point(2, 20, null), point(3, 30, 92)];
    expect(surveyPoints(events, 'airTrim').map(({ value }) => value)).toEqual([10, 30]);
    expect(surveyPoints(events, 'fuel')).toEqual([]);
  });

  it('begins the way of the estimate with the seek', () => {
    const began = event(4, { type: 'step.started', step: 'seek', kind: 'seek' }, 42);
    expect(seekBeganS([point(1, 10, 90), began])).toBe(42);
    expect(seekBeganS([])).toBeNull();
    const samples = {
      columns: ['seek.estimate.airTrim', 'objective'],
      isExact: true,
      tS: [42, 43],
      mean: [
        [60, 59],
        [90, null],
      ],
      min: [],
      max: [],
    };
    expect(seekPath(samples, 'seek.estimate.airTrim')).toEqual([{ value: 60, objective: 90 }]);
  });
});
