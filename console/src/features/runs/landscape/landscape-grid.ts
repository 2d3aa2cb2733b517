import type { RunEvent } from '@cresthold/shared';

/** Mean objective over the places of a survey over two actuators. */
export interface LandscapeGrid {
  /** Values of the first actuator and of the second, rising. */
  xs: number[];
  ys: number[];
  /** Row by row of the second actuator; null where nothing valid was measured. */
  objectives: (number | null)[];
}

/** Share of the span within which two values are one place: wires round. */
const sameShare = 1e-3;

/** What the surveys over two actuators have measured so far; null where there is none. */
export function landscapeGrid(events: readonly RunEvent[], x: string, y: string): LandscapeGrid | null {
  const points = events.flatMap(({ body }) => {
    if (body.type !== 'survey.point-measured' || !body.second || body.objective === null) return [];
    const of: Record<string, number> = {
      [body.actuator]: body.value,
      [body.second.actuator]: body.second.value,
    };
    const [px, py] = [of[x], of[y]];
    return px === undefined || py === undefined
      ? []
      : [{ x: px, y: py, z: body.objective, isValid: body.isValid }];
  });
  if (points.length === 0) return null;
  const xs = placesOf(points.map((point) => point.x));
  const ys = placesOf(points.map((point) => point.y));
  const sums = new Map<number, { sum: number; count: number; isValid: boolean }>();
  for (const point of points) {
    const cell = nearest(ys, point.y) * xs.length + nearest(xs, point.x);
    const before = sums.get(cell) ?? { sum: 0, count: 0, isValid: true };
    sums.set(cell, {
      sum: before.sum + point.z,
      count: before.count + 1,
      isValid: before.isValid && point.isValid,
    });
  }
  const objectives = Array.from({ length: xs.length * ys.length }, (_, cell) => {
    const found = sums.get(cell);
    return found?.isValid ? found.sum / found.count : null;
  });
  return { xs, ys, objectives };
}

function placesOf(values: readonly number[]): number[] {
  const sorted = [...values].sort((a, b) => a - b);
  const slack = ((sorted.at(-1) ?? 0) - (sorted[0] ?? 0)) * sameShare;
  return sorted.filter((value, i) => i === 0 || value - (sorted[i - 1] ?? NaN) > slack);
}

function nearest(places: readonly number[], value: number): number {
  return places.reduce(
    (a, place, i) => (Math.abs(place - value) < Math.abs((places[a] ?? NaN) - value) ? i : a),
    0,
  );
}

export interface Segment {
  from: readonly [x: number, y: number];
  to: readonly [x: number, y: number];
}

/**
 * Pieces of the line along which the objective has one value: each triangle of the grid is crossed in a straight line.
 * Cells with a corner that is not known have none.
 */
export function contourSegments({ xs, ys, objectives }: LandscapeGrid, level: number): Segment[] {
  const segments: Segment[] = [];
  const corner = (column: number, row: number): Corner | null => {
    const z = objectives[row * xs.length + column] ?? null;
    return z === null ? null : { at: [xs[column] ?? NaN, ys[row] ?? NaN], z };
  };
  for (let row = 0; row + 1 < ys.length; row += 1) {
    for (let column = 0; column + 1 < xs.length; column += 1) {
      const [a, b] = [corner(column, row), corner(column + 1, row)];
      const [c, d] = [corner(column + 1, row + 1), corner(column, row + 1)];
      if (!a || !b || !c || !d) continue;
      for (const triangle of [
        [a, b, c],
        [a, c, d],
      ] as const) {
        const [from, to] = crossings(triangle, level);
        if (from && to) segments.push({ from, to });
      }
    }
  }
  return segments;
}

interface Corner {
  at: readonly [number, number];
  z: number;
}

function crossings(
  triangle: readonly [Corner, Corner, Corner],
  level: number,
): (readonly [number, number])[] {
  return triangle.flatMap((from, i) => {
    const to = triangle[(i + 1) % 3] as Corner;
    if (from.z < level === to.z < level) return [];
    const share = (level - from.z) / (to.z - from.z);
    return [
      [from.at[0] + share * (to.at[0] - from.at[0]), from.at[1] + share * (to.at[1] - from.at[1])] as const,
    ];
  });
}
