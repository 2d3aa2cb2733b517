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
    const share = index / (points - 1);
    return { target: from * (1 - share) + to * share, branch: 'up', index };
  });
  if (!isUpAndDown) return up;
  return [...up, ...up.map((visit): SurveyVisit => ({ ...visit, branch: 'down' })).reverse()];
}
