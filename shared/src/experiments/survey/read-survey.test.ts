import { describe, expect, it } from 'vitest';
import { readSurvey } from './read-survey.js';
import { surveyBacklash } from './survey-backlash.js';
import { SurveyPlaces, type SurveyMeasurement } from './survey-places.js';
import { planSurvey, type SurveyedRange } from './survey-plan.js';

const range = (from: number, to: number, points: number, isUpAndDown = false): SurveyedRange => ({
  from,
  to,
  points,
  isUpAndDown,
});

/** Measures a map on every visit of a plan. */
function measure(
  ranges: readonly SurveyedRange[],
  map: (place: readonly number[], branches: readonly string[]) => number,
  change: Partial<SurveyMeasurement> = {},
): SurveyMeasurement[] {
  return planSurvey(ranges).map((visit) => {
    const applied = visit.map(({ target }) => target);
    const objective = map(
      applied,
      visit.map(({ branch }) => branch),
    );
    return { visit, applied, objective, standardError: 0, isValid: true, ...change };
  });
}

const read = (
  ranges: readonly SurveyedRange[],
  map: Parameters<typeof measure>[1],
  choose: 'highest' | 'most-prominent' = 'highest',
  direction: 'maximise' | 'minimise' = 'maximise',
) => readSurvey(new SurveyPlaces(ranges, measure(ranges, map)), direction, choose);
const backlash = (ranges: readonly SurveyedRange[], map: Parameters<typeof measure>[1]) =>
  ranges.map((_, i) => surveyBacklash(new SurveyPlaces(ranges, measure(ranges, map)), i).value);

const listed = (values: number[]) => (place: readonly number[]) => values[place[0] ?? 0] ?? NaN;

describe('the plan of a survey', () => {
  it('has exact ends, evenly, up and down', () => {
    const visits = planSurvey([range(0.1, 0.7, 4, true)]).map(([visit]) => visit);
    expect(visits.map((visit) => Number(visit?.target.toFixed(12)))).toEqual([
      0.1, 0.3, 0.5, 0.7, 0.7, 0.5, 0.3, 0.1,
    ]);
    expect(visits[0]?.target).toBe(0.1);
    expect(visits[3]?.target).toBe(0.7);
    expect(visits.map((visit) => visit?.branch).join()).toBe('up,up,up,up,down,down,down,down');
  });

  it.each([
    [false, false, 12],
    [true, false, 24],
    [false, true, 24],
    [true, true, 48],
  ])('moves one actuator by one step from visit to visit (up and down: %s, %s)', (x, y, count) => {
    const visits = planSurvey([range(0, 3, 4, x), range(0, 2, 3, y)]);
    expect(visits.length).toBe(count);
    const steps = visits.slice(1).map((visit, i) => {
      const before = visits[i] ?? [];
      return visit.reduce((sum, { index }, axis) => sum + Math.abs(index - (before[axis]?.index ?? NaN)), 0);
    });
    expect(Math.max(...steps)).toBe(1);
    const places = new Set(visits.map((visit) => visit.map(({ index }) => index).join()));
    expect(places.size).toBe(12);
  });

  it('calls each move by the way that it goes', () => {
    for (const isUpAndDown of [false, true]) {
      const visits = planSurvey([range(0, 3, 4, isUpAndDown), range(0, 2, 3, true)]);
      visits.slice(1).forEach((visit, i) => {
        visit.forEach(({ index, branch }, axis) => {
          const step = index - (visits[i]?.[axis]?.index ?? NaN);
          if (step !== 0) expect(branch).toBe(step > 0 ? 'up' : 'down');
        });
      });
    }
  });
});

describe('a survey over one actuator', () => {
  it('takes the mean of both ways and honours the direction', () => {
    const both =
      (up: number[], down: number[]) =>
      (place: readonly number[], [branch]: readonly string[]) =>
        listed(branch === 'up' ? up : down)(place);
    const map = both([1, 4, 2], [3, 5, 9]);
    const found = read([range(0, 2, 3, true)], map);
    expect(found).toMatchObject({ best: { values: [2], objective: 5.5 }, hysteresis: 7, peaks: 1 });
    expect(read([range(0, 2, 3, true)], map, 'highest', 'minimise')?.best).toEqual({
      values: [0],
      objective: 2,
    });
  });

  it('has no hysteresis without a way down', () => {
    expect(read([range(0, 2, 3)], listed([1, 2, 3]))?.hysteresis).toBeNaN();
  });

  it('takes only values that were valid on both ways', () => {
    const ranges = [range(0, 2, 3, true)];
    const measured = measure(ranges, listed([1, 9, 8])).map((one, i) => ({
      ...one,
      isValid: i !== 1 && i !== 3,
    }));
    expect(readSurvey(new SurveyPlaces(ranges, measured), 'maximise', 'highest')?.best.values).toEqual([0]);
    expect(
      readSurvey(
        new SurveyPlaces(ranges, measure(ranges, listed([1, 2, 3]), { isValid: false })),
        'maximise',
        'highest',
      ),
    ).toBeNull();
  });

  it('does not take noise for hills', () => {
    const ranges = [range(0, 4, 5)];
    const map = listed([0, 3, 2.5, 2.9, 0]);
    const peaks = (standardError: number) =>
      readSurvey(new SurveyPlaces(ranges, measure(ranges, map, { standardError })), 'maximise', 'highest')
        ?.peaks;
    expect(peaks(0)).toBe(2);
    expect(peaks(0.2)).toBe(1);
  });

  it('measures the chosen hill: prominence, and the curvature of a parabola with its error', () => {
    const found = read([range(-5, 5, 21)], ([x = NaN]) => 90 - 0.7 * (x - 1) ** 2);
    expect(found?.best.values).toEqual([1]);
    expect(found?.prominence).toBeCloseTo(0.7 * 36, 9);
    expect(found?.curvatures[0]?.value).toBeCloseTo(-1.4, 9);
    expect(found?.curvatures[0]?.standardError).toBeLessThan(1e-6);
  });

  it('chooses the highest place, or the hill whose top can be seen from both sides', () => {
    // A hill of 3 inside the range, and ground that rises to 5 at its end.
    const map = listed([0, 3, 1, 2, 5]);
    expect(read([range(0, 4, 5)], map)?.best).toEqual({ values: [4], objective: 5 });
    expect(read([range(0, 4, 5)], map, 'most-prominent')?.best).toEqual({ values: [1], objective: 3 });
    expect(read([range(0, 4, 5)], map, 'most-prominent')?.prominence).toBe(2);
    expect(read([range(0, 2, 3)], listed([0, 1, 2]), 'most-prominent')?.best.values).toEqual([2]);
  });

  it('reads values that a coarse wire has put in one place once, and a range from high to low', () => {
    const ranges = [range(4, 0, 9)];
    const measured = measure(ranges, ([x = NaN]) => 10 - (Math.round(x) - 2) ** 2).map((one) => ({
      ...one,
      applied: one.applied.map(Math.round),
    }));
    const found = readSurvey(new SurveyPlaces(ranges, measured), 'maximise', 'highest');
    expect(found).toMatchObject({ best: { values: [2], objective: 10 }, peaks: 1 });
  });

  it('tells the backlash by the distance of the two ways', () => {
    // Play of width b: the way up shows f(u − b/2), the way down f(u + b/2).
    const [width] = backlash(
      [range(-5, 5, 21, true)],
      ([x = NaN], [branch]) => 90 - (x - 1 + (branch === 'up' ? -0.2 : 0.2)) ** 2,
    );
    expect(width).toBeCloseTo(0.4, 3);
  });
});

describe('a survey over two actuators', () => {
  const hill = ([x = NaN, y = NaN]: readonly number[]) =>
    50 - (x - 1) ** 2 - 3 * (y + 2) ** 2 - (x - 1) * (y + 2);

  it.each([
    [false, false],
    [true, false],
    [false, true],
    [true, true],
  ])('finds place and curvatures of a paraboloid (up and down: %s, %s)', (x, y) => {
    const found = read([range(-5, 5, 11, x), range(-5, 5, 11, y)], hill);
    expect(found?.best).toEqual({ values: [1, -2], objective: 50 });
    expect(found?.peaks).toBe(1);
    // Second derivatives of the map: −2 along x, −6 along y.
    expect(found?.curvatures[0]?.value).toBeCloseTo(-2, 9);
    expect(found?.curvatures[1]?.value).toBeCloseTo(-6, 9);
    if (x || y) expect(found?.hysteresis).toBe(0);
    else expect(found?.hysteresis).toBeNaN();
  });

  it('counts hills and goes to the highest, whichever way the ranges run', () => {
    const two = ([x = NaN, y = NaN]: readonly number[]) =>
      3 * Math.exp(-((x + 2) ** 2) - y * y) + 4 * Math.exp(-((x - 2) ** 2) - (y - 1) ** 2);
    const found = read([range(4, -4, 17), range(3, -3, 13)], two);
    expect(found?.best.values).toEqual([2, 1]);
    expect(found?.peaks).toBe(2);
  });

  it('tells the backlash of each actuator', () => {
    const shift = (branch: string | undefined, width: number) => (branch === 'up' ? -width / 2 : width / 2);
    const widths = backlash([range(-5, 5, 13, true), range(-5, 5, 13, true)], ([x = NaN, y = NaN], [a, b]) =>
      hill([x + shift(a, 0.3), y + shift(b, 0.5)]),
    );
    expect(widths[0]).toBeCloseTo(0.3, 2);
    expect(widths[1]).toBeCloseTo(0.5, 2);
  });
});
