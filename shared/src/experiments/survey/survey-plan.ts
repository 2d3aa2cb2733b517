export type Branch = 'up' | 'down';

/** Where one actuator is on one visit of a survey. */
export interface VisitedValue {
  target: number;
  branch: Branch;
  /** Number of the value on the way up, from 0. */
  index: number;
}

/** One visit of a survey: a value per actuator. */
export type SurveyVisit = readonly VisitedValue[];

export interface SurveyedRange {
  from: number;
  to: number;
  points: number;
  isUpAndDown: boolean;
}

/**
 * The visits of a survey in their order. One actuator: evenly spaced values from one end to the other and, where
 * asked, back again; both ends are exact. Two: for each value of the second one the first goes its way, beginning
 * where it ended on the row before, so that only one actuator moves from visit to visit. Where the second is to go
 * back as well, the whole way is gone back.
 */
export function planSurvey(ranges: readonly SurveyedRange[]): SurveyVisit[] {
  const [first, second] = ranges;
  if (!first) return [];
  if (!second) return wayOf(first).map((value) => [value]);
  const forth = valuesOf(second).flatMap((value, row) =>
    rowOf(first, row).map((along): readonly [VisitedValue, VisitedValue] => [along, value]),
  );
  if (!second.isUpAndDown) return forth;
  // Gone backwards, a row that went up goes down.
  const back = forth.map(([along, value]): SurveyVisit => [turned(along), { ...value, branch: 'down' }]);
  return [...forth, ...back.reverse()];
}

/** A row of the first actuator: there and back, or every other row backwards. */
function rowOf(range: SurveyedRange, row: number): VisitedValue[] {
  if (range.isUpAndDown || row % 2 === 0) return wayOf(range);
  return valuesOf(range)
    .reverse()
    .map((value): VisitedValue => ({ ...value, branch: 'down' }));
}

const turned = (value: VisitedValue): VisitedValue => ({
  ...value,
  branch: value.branch === 'up' ? 'down' : 'up',
});

function wayOf(range: SurveyedRange): VisitedValue[] {
  const up = valuesOf(range);
  if (!range.isUpAndDown) return up;
  return [...up, ...up.map((value): VisitedValue => ({ ...value, branch: 'down' })).reverse()];
}

/** The values of one actuator on its way up, evenly spaced; both ends are exact. */
export function valuesOf({ from, to, points }: SurveyedRange): VisitedValue[] {
  return Array.from({ length: points }, (_, index) => {
    const left = points - 1 - index;
    // Joined so that round ends give round values between them.
    const between = (from * left + to * index) / (points - 1);
    return { target: index === 0 ? from : left === 0 ? to : between, branch: 'up', index };
  });
}
