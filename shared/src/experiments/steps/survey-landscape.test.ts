import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { countPeaks, judgeSurvey, type SurveyPoint } from './survey-landscape.js';
import { planSurvey } from './survey-plan.js';

const points = (objectives: number[], change: Partial<SurveyPoint> = {}): SurveyPoint[] =>
  objectives.map((objective, value) => ({ value, objective, standardError: 0, isValid: true, ...change }));

describe('hills of a survey', () => {
  it.each([
    [[], 0],
    [[5], 1],
    [[5, 5, 5], 1],
    [[1, 2, 3], 1],
    [[3, 2, 1], 1],
    [[3, 1, 3], 2],
    [[0, 3, 1, 2, 0], 2],
    [[0, 3, 3, 0], 1],
    [[0, 2, 2, 5], 1],
    [[0, 3, 1, 3, 0], 2],
    [[0, 3, 2.6, 2.9, 0], 1],
    [[4, 0, 3, 1, 5, 2, 2.4], 3],
  ])('%j has %d above a prominence of 0.5', (heights, expected) => {
    expect(countPeaks(heights, 0.5)).toBe(expected);
  });

  it('are at least one wherever there is a point, and do not hang on the direction of the walk', () => {
    const heights = fc.array(fc.integer({ min: 0, max: 5 }), { minLength: 1, maxLength: 12 });
    fc.assert(
      fc.property(heights, fc.constantFrom(0, 0.5, 1.5), (any, least) => {
        expect(countPeaks(any, least)).toBeGreaterThanOrEqual(1);
        expect(countPeaks([...any].reverse(), least)).toBe(countPeaks(any, least));
      }),
    );
  });
});

describe('a survey', () => {
  it('takes the mean of both ways and honours the direction', () => {
    const up = points([1, 4, 2]);
    const down = points([3, 5, 9]);
    expect(judgeSurvey(up, down, 'maximise')).toEqual({
      best: { value: 2, objective: 5.5 },
      hysteresis: 7,
      peaks: 1,
    });
    expect(judgeSurvey(up, down, 'minimise')?.best).toEqual({ value: 0, objective: 2 });
  });

  it('has no hysteresis without a way down', () => {
    expect(judgeSurvey(points([1, 2]), [], 'maximise')?.hysteresis).toBeNaN();
  });

  it('takes only values that were valid on both ways', () => {
    const up = points([1, 9, 8]).map((point, i) => ({ ...point, isValid: i !== 1 }));
    const down = points([1, 9, 8]).map((point, i) => ({ ...point, isValid: i !== 2 }));
    expect(judgeSurvey(up, down, 'maximise')?.best.value).toBe(0);
    expect(judgeSurvey(points([1, 2], { isValid: false }), [], 'maximise')).toBeNull();
  });

  it('does not take noise for hills', () => {
    expect(judgeSurvey(points([0, 3, 2.5, 2.9, 0]), [], 'maximise')?.peaks).toBe(2);
    expect(judgeSurvey(points([0, 3, 2.5, 2.9, 0], { standardError: 0.2 }), [], 'maximise')?.peaks).toBe(1);
  });

  it('is planned with exact ends, evenly, up and down', () => {
    const visits = planSurvey(0.1, 0.7, 4, true);
    expect(visits.map(({ target }) => Number(target.toFixed(12)))).toEqual([
      0.1, 0.3, 0.5, 0.7, 0.7, 0.5, 0.3, 0.1,
    ]);
    expect(visits[0]?.target).toBe(0.1);
    expect(visits[3]?.target).toBe(0.7);
    expect(visits.map(({ branch }) => branch).join()).toBe('up,up,up,up,down,down,down,down');
    expect(planSurvey(0, 1, 3, false).length).toBe(3);
  });
});
