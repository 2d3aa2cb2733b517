import { describe, expect, it } from 'vitest';
import type { RunEvent } from '@cresthold/shared';
import { contourSegments, landscapeGrid } from './landscape-grid.js';

function point(sequence: number, x: number, y: number, objective: number, isValid = true): RunEvent {
  const second = { actuator: 'fuel', value: y, branch: 'up' as const };
  const body = {
    ...{
      type: 'survey.point-measured' as const,
      step: 'survey',
      actuator: 'air',
      value: x,
      branch: 'up' as const,
    },
    ...{ objective, standardError: null, isValid, second },
  };
  return { sequence, tS: sequence, at: '2026-01-01T00:00:00.000Z', body };
}

describe('the map of a survey over two actuators', () => {
  const events = [0, 1, 2].flatMap((y) =>
    [0, 1, 2].map((x) => point(1 + x + 3 * y, x + 1e-5 * y, y, x + 10 * y)),
  );

  it('has one place where a wire has rounded, row by row of the second actuator', () => {
    const grid = landscapeGrid(events, 'air', 'fuel');
    expect(grid?.xs.length).toBe(3);
    expect(grid?.objectives).toEqual([0, 1, 2, 10, 11, 12, 20, 21, 22]);
    expect(landscapeGrid(events, 'fuel', 'air')?.objectives.slice(0, 3)).toEqual([0, 10, 20]);
    expect(landscapeGrid([], 'air', 'fuel')).toBeNull();
  });

  it('takes the mean of both ways, and nothing where one was not valid', () => {
    const both = [...events, point(10, 0, 0, 4), point(11, 1, 0, 5, false)];
    expect(landscapeGrid(both, 'air', 'fuel')?.objectives.slice(0, 3)).toEqual([2, null, 2]);
  });

  it('has lines of equal height where the plane has them', () => {
    // On z = x + 10·y the line z = 11 is x = 11 − 10·y.
    const grid = landscapeGrid(events, 'air', 'fuel');
    const ends = contourSegments(grid ?? { xs: [], ys: [], objectives: [] }, 11).flatMap(({ from, to }) => [
      from,
      to,
    ]);
    expect(ends.length).toBeGreaterThan(3);
    for (const [x, y] of ends) expect(x + 10 * y).toBeCloseTo(11, 3);
  });
});
