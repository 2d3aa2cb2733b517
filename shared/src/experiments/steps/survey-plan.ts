export type Branch = 'up' | 'down';

/** One visit of a survey. */
export interface SurveyVisit {
  target: number;
  branch: Branch;
  /** Number of the value on the way up, from 0. */
  index: number;
}

/** Evenly spaced values from one end to the other and, where asked, back again; both ends are exact. */
export function planSurvey(from: number, to: number, points: number, isUpAndDown: boolean): SurveyVisit[] {
  const up = Array.from({ length: points }, (_, index): SurveyVisit => {
    const left = points - 1 - index;
    // Joined so that round ends give round values between them.
    const between = (from * left + to * index) / (points - 1);
    return { target: index === 0 ? from : left === 0 ? to : between, branch: 'up', index };
  });
  if (!isUpAndDown) return up;
  return [...up, ...up.map((visit): SurveyVisit => ({ ...visit, branch: 'down' })).reverse()];
}
