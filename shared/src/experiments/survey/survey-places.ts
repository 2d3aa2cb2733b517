import type { SurveySample } from '../../identification/survey-map.types.js';
import { valuesOf, type SurveyedRange, type SurveyVisit, type VisitedValue } from './survey-plan.js';

/** What one visit of a survey found. */
export interface SurveyMeasurement extends SurveySample {
  visit: SurveyVisit;
  /** Applied value of each actuator, its unit. */
  applied: readonly number[];
}

/** The measurements of a survey by place: a place is an index per actuator. */
export class SurveyPlaces {
  private readonly byPlace = new Map<string, SurveyMeasurement[]>();
  private readonly values: readonly (readonly VisitedValue[])[];

  constructor(
    readonly ranges: readonly SurveyedRange[],
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
