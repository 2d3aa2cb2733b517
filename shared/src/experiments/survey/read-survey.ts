import { DomainError } from '../../errors/domain-error.js';
import { readSurveyCurve } from '../../identification/survey-curve.js';
import type { SurveyHill } from '../../identification/survey-map.types.js';
import { readSurveySurface } from '../../identification/survey-surface.js';
import type { Direction } from '../../objectives/objective.schema.js';
import { noEstimate, type Estimate } from '../../signals/estimate.js';
import type { SurveyParameters } from './survey-parameters.schema.js';
import type { SurveyPlaces } from './survey-places.js';

export interface SurveyFindings {
  /** The chosen hill: applied values of its best place, and the objective as measured there. */
  best: { values: number[]; objective: number };
  /** Hills that stand out of the noise. */
  peaks: number;
  /** Of the chosen hill, objective unit. */
  prominence: number;
  /** Second derivative along each actuator at the top of the chosen hill; NaN where the map does not say. */
  curvatures: Estimate[];
  /** Greatest difference in size between two ways over one place; NaN where there was one way only. */
  hysteresis: number;
}

/** A curve costs the square of its places, and it is laid within a scan. */
const smoothedMax = 30;

/**
 * What a survey over one actuator or two shows. A place counts where every visit to it was valid; its objective is
 * then their mean. Values that fall on one point of a coarse wire are one place.
 *
 * @returns null where no place counts
 */
export function readSurvey(
  places: SurveyPlaces,
  direction: Direction,
  choose: SurveyParameters['choose'],
): SurveyFindings | null {
  const hills =
    places.ranges.length === 1 ? hillsOfCurve(places, direction) : hillsOfSurface(places, direction);
  const hill = chosen(hills, choose, direction);
  if (!hill) return null;
  return {
    best: { values: hill.values, objective: hill.objective },
    peaks: hills.filter(standsOut).length,
    prominence: hill.prominence,
    curvatures: hill.curvatures,
    hysteresis: places.greatestGap(),
  };
}

interface Hill extends SurveyHill {
  values: number[];
  curvatures: Estimate[];
  /** Its top lies at an end of a range: what comes beyond is not known. */
  isAtEnd: boolean;
}

/** Share of the objective below which a hill is rounding. */
const roundingShare = 1e-12;

function standsOut({ isDistinct, prominence, objective }: SurveyHill, rank: number): boolean {
  return isDistinct && (rank === 0 || prominence > roundingShare * Math.abs(objective));
}

function chosen(
  hills: readonly Hill[],
  choose: SurveyParameters['choose'],
  direction: Direction,
): Hill | undefined {
  const sign = direction === 'maximise' ? 1 : -1;
  const distinct = hills.filter(standsOut);
  const inside = distinct.find(({ isAtEnd }) => !isAtEnd);
  if (choose === 'most-prominent' && inside) return inside;
  return [...distinct].sort((a, b) => sign * (b.objective - a.objective))[0];
}

function hillsOfCurve(places: SurveyPlaces, direction: Direction): Hill[] {
  const cells = places.rising(0).map((index) => ({ index, value: places.applied([index])[0] ?? NaN }));
  const samples = distinctValues(cells).map(({ index, value }) => ({ value, ...places.sample([index], []) }));
  const findings = unlessEmpty(() => readSurveyCurve(samples, [], direction, smoothedMax));
  const last = (findings?.samples.length ?? 0) - 1;
  return (findings?.hills ?? []).map((hill) => ({
    ...hill,
    values: [hill.value],
    curvatures: [hill.peak?.curvature ?? noEstimate()],
    isAtEnd: hill.index === 0 || hill.index === last,
  }));
}

function hillsOfSurface(places: SurveyPlaces, direction: Direction): Hill[] {
  const [columns, rows] = [places.rising(0), places.rising(1)];
  const cells = rows.flatMap((row) => columns.map((column) => [column, row]));
  const xs = columns.map((index) => places.target(0, index));
  const ys = rows.map((index) => places.target(1, index));
  const up = cells.map((cell) => places.sample(cell, []));
  const findings = unlessEmpty(() => readSurveySurface({ xs, ys, up, down: [] }, direction));
  const isEnd = (value: number, values: readonly number[]) => value === values[0] || value === values.at(-1);
  return (findings?.hills ?? []).map((hill) => ({
    ...hill,
    values: places.applied(cells[hill.index] ?? []),
    curvatures: [hill.peak?.hessian.xx ?? noEstimate(), hill.peak?.hessian.yy ?? noEstimate()],
    isAtEnd: isEnd(hill.x, xs) || isEnd(hill.y, ys),
  }));
}

/** The first of several places with one applied value stands for all of them. */
function distinctValues<T extends { value: number }>(places: readonly T[]): T[] {
  return [...places]
    .sort((a, b) => a.value - b.value)
    .filter(({ value }, i, all) => value !== all[i - 1]?.value);
}

function unlessEmpty<T>(read: () => T): T | null {
  try {
    return read();
  } catch (error) {
    if (error instanceof DomainError && error.code === 'analysis.too-little-data') return null;
    throw error;
  }
}
