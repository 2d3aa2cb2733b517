import { DomainError } from '../../errors/domain-error.js';
import { backlashWidth } from '../../identification/backlash.js';
import { readSurveyCurve } from '../../identification/survey-curve.js';
import type { SurveyHill, SurveySample } from '../../identification/survey-map.types.js';
import { readSurveySurface } from '../../identification/survey-surface.js';
import type { Direction } from '../../objectives/objective.schema.js';
import { noEstimate, type Estimate } from '../../signals/estimate.js';
import type { SurveyParameters } from './survey-parameters.schema.js';
import { valuesOf, type SurveyedRange, type SurveyVisit, type VisitedValue } from './survey-plan.js';

/** What one visit of a survey found. */
export interface SurveyMeasurement extends SurveySample {
  visit: SurveyVisit;
  /** Applied value of each actuator, its unit. */
  applied: readonly number[];
}

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
  /** Width of each actuator's backlash, its unit; NaN where it did not go up and down or the map does not say. */
  backlashes: Estimate[];
}

/**
 * What a survey over one actuator or two shows. A place counts where every visit to it was valid; its objective is
 * then their mean.
 *
 * @param ranges as planned; values that fall on one point of a coarse wire are one place
 * @returns null where no place counts
 */
export function readSurvey(
  ranges: readonly SurveyedRange[],
  measured: readonly SurveyMeasurement[],
  direction: Direction,
  choose: SurveyParameters['choose'],
): SurveyFindings | null {
  const places = new SurveyPlaces(ranges, measured);
  const seen = ranges.length === 1 ? seeCurve(places, direction) : seeSurface(places, direction);
  if (!seen) return null;
  const hill = chosen(seen.hills, choose, direction);
  if (!hill) return null;
  return {
    best: { values: hill.values, objective: hill.objective },
    peaks: seen.hills.filter(standsOut).length,
    prominence: hill.prominence,
    curvatures: hill.curvatures,
    hysteresis: places.greatestGap(),
    backlashes: seen.backlashes,
  };
}

interface Hill extends SurveyHill {
  values: number[];
  curvatures: Estimate[];
  /** Its top lies at an end of a range: what comes beyond is not known. */
  isAtEnd: boolean;
}

interface Seen {
  hills: Hill[];
  backlashes: Estimate[];
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

function seeCurve(places: SurveyPlaces, direction: Direction): Seen | null {
  const isBoth = places.isUpAndDown(0);
  const cells = places.rising(0).map((index) => [index]);
  const valueOf = (cell: readonly number[]) => places.applied(cell)[0] ?? NaN;
  const known = distinctValues(cells.map((cell) => ({ cell, value: valueOf(cell) })));
  const samples = (branch: 'up' | 'down') =>
    known.map(({ cell, value }) => ({ value, ...places.sample(cell, isBoth ? [branch] : []) }));
  const findings = unlessEmpty(() =>
    readSurveyCurve(samples('up'), isBoth ? samples('down') : [], direction),
  );
  if (!findings) return null;
  const { samples: good, hills, backlash } = findings;
  return {
    backlashes: [backlash],
    hills: hills.map((hill) => ({
      ...hill,
      values: [hill.value],
      curvatures: [hill.peak?.curvature ?? noEstimate()],
      isAtEnd: hill.index === 0 || hill.index === good.length - 1,
    })),
  };
}

function seeSurface(places: SurveyPlaces, direction: Direction): Seen | null {
  const [columns, rows] = [places.rising(0), places.rising(1)];
  const cells = rows.flatMap((row) => columns.map((column) => [column, row]));
  const isBoth = places.isUpAndDown(0);
  const samples = (branch: 'up' | 'down') => cells.map((cell) => places.sample(cell, isBoth ? [branch] : []));
  const xs = columns.map((index) => places.target(0, index));
  const ys = rows.map((index) => places.target(1, index));
  const findings = unlessEmpty(() =>
    readSurveySurface({ xs, ys, up: samples('up'), down: isBoth ? samples('down') : [] }, direction),
  );
  if (!findings) return null;
  return {
    backlashes: [findings.backlash, acrossBacklash(places)],
    hills: findings.hills.map((hill) => ({
      ...hill,
      values: places.applied(cells[hill.index] ?? []),
      curvatures: [hill.peak?.hessian.xx ?? noEstimate(), hill.peak?.hessian.yy ?? noEstimate()],
      isAtEnd: [hill.x === xs[0], hill.x === xs.at(-1), hill.y === ys[0], hill.y === ys.at(-1)].includes(
        true,
      ),
    })),
  };
}

/** Fewest values in a column for it to tell the backlash of the second actuator. */
const columnValuesMin = 6;

function acrossBacklash(places: SurveyPlaces): Estimate {
  if (!places.isUpAndDown(1)) return noEstimate();
  const lines = places.rising(0).flatMap((column) => {
    const good = places.rising(1).flatMap((row) => {
      const [up, down] = (['up', 'down'] as const).map((branch) =>
        places.sample([column, row], [undefined, branch]),
      );
      return up?.isValid && down?.isValid
        ? [{ value: places.target(1, row), up: up.objective, down: down.objective }]
        : [];
    });
    if (good.length < columnValuesMin) return [];
    return [{ values: good.map((g) => g.value), up: good.map((g) => g.up), down: good.map((g) => g.down) }];
  });
  return lines.length > 0 ? backlashWidth(lines) : noEstimate();
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

/** The measurements of a survey by place: a place is an index per actuator. */
class SurveyPlaces {
  private readonly byPlace = new Map<string, SurveyMeasurement[]>();
  private readonly values: readonly (readonly VisitedValue[])[];

  constructor(
    private readonly ranges: readonly SurveyedRange[],
    measured: readonly SurveyMeasurement[],
  ) {
    this.values = ranges.map(valuesOf);
    for (const one of measured) {
      const key = one.visit.map(({ index }) => index).join();
      this.byPlace.set(key, [...(this.byPlace.get(key) ?? []), one]);
    }
  }

  isUpAndDown(actuator: number): boolean {
    return this.ranges[actuator]?.isUpAndDown === true;
  }

  /** Indices of an actuator's values, by rising value. */
  rising(actuator: number): number[] {
    const { from = 0, to = 0, points = 0 } = this.ranges[actuator] ?? {};
    const indices = Array.from({ length: points }, (_, index) => index);
    return from <= to ? indices : indices.reverse();
  }

  /** Planned value. */
  target(actuator: number, index: number): number {
    return this.values[actuator]?.[index]?.target ?? NaN;
  }

  /** Applied values, averaged over all visits. */
  applied(cell: readonly number[]): number[] {
    const visits = this.byPlace.get(cell.join()) ?? [];
    return cell.map(
      (_, i) => visits.reduce((sum, { applied }) => sum + (applied[i] ?? NaN), 0) / visits.length,
    );
  }

  /** Mean of the visits that came on the given branches; valid where all of them were. */
  sample(cell: readonly number[], branches: readonly (string | undefined)[]): SurveySample {
    const visits = (this.byPlace.get(cell.join()) ?? []).filter(({ visit }) =>
      branches.every((branch, i) => branch === undefined || visit[i]?.branch === branch),
    );
    const count = visits.length;
    return {
      objective: visits.reduce((sum, { objective }) => sum + objective, 0) / count,
      standardError: Math.hypot(...visits.map(({ standardError }) => standardError)) / count,
      isValid: count > 0 && visits.every(({ isValid }) => isValid),
    };
  }

  /** Greatest difference of two valid visits of one place, in size; NaN where there are none. */
  greatestGap(): number {
    let greatest = NaN;
    for (const visits of this.byPlace.values()) {
      const good = visits.filter(({ isValid }) => isValid).map(({ objective }) => objective);
      if (good.length < 2) continue;
      const gap = Math.max(...good) - Math.min(...good);
      if (!(gap <= greatest)) greatest = gap;
    }
    return greatest;
  }
}
