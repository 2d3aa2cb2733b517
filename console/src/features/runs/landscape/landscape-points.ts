import type { ExperimentGraph, RunEvent } from '@cresthold/shared';
import type { RunSamples } from '../api/run-queries.js';

export interface LandscapePoint {
  value: number;
  objective: number;
  branch: 'up' | 'down';
  isValid: boolean;
}

export interface PathPoint {
  value: number;
  objective: number;
}

/** Points of the surveys over one actuator, in the order in which they were measured. */
export function surveyPoints(events: readonly RunEvent[], actuator: string): LandscapePoint[] {
  return events.flatMap(({ body }) =>
    body.type === 'survey.point-measured' && body.actuator === actuator && body.objective !== null
      ? [{ value: body.value, objective: body.objective, branch: body.branch, isValid: body.isValid }]
      : [],
  );
}

/** When the first Seek of the run began, s; null where none has. */
export function seekBeganS(events: readonly RunEvent[]): number | null {
  return events.find(({ body }) => body.type === 'step.started' && body.kind === 'seek')?.tS ?? null;
}

/** Where the estimate went and what the objective was there; pieces without a good value are left out. */
export function seekPath(samples: RunSamples, estimateColumn: string): PathPoint[] {
  const values = samples.mean[samples.columns.indexOf(estimateColumn)] ?? [];
  const objectives = samples.mean[samples.columns.indexOf('objective')] ?? [];
  return values.flatMap((value, index) => {
    const objective = objectives[index];
    return value === null || objective === null || objective === undefined ? [] : [{ value, objective }];
  });
}

/** Where the estimates of two actuators went together. */
export function seekPlane(samples: RunSamples, xColumn: string, yColumn: string): { x: number; y: number }[] {
  const [xs, ys] = [xColumn, yColumn].map((name) => samples.mean[samples.columns.indexOf(name)] ?? []);
  return (xs ?? []).flatMap((x, i) => {
    const y = ys?.[i];
    return x === null || y === null || y === undefined ? [] : [{ x, y }];
  });
}

/** The actuators of the landscape: of the first Seek, or else of the first Survey. */
export function landscapeActuators(graph: ExperimentGraph): string[] {
  for (const kind of ['seek', 'survey'] as const) {
    for (const step of graph.steps) {
      if ((step.kind === 'seek' || step.kind === 'survey') && step.kind === kind)
        return step.parameters.actuators.map(({ channel }) => channel);
    }
  }
  return [];
}
