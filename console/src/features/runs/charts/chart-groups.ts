import {
  commandedActuators,
  earlierEstimateColumn,
  estimateColumn,
  type Channel,
  type ExperimentGraph,
  type Rig,
  type RunColumn,
} from '@cresthold/shared';
import type { ChartTrace } from '../../../components/strip-chart/index.js';

/** One sheet of the run's charts. */
export interface ChartGroup {
  title: string;
  traces: ChartTrace[];
  /** What the experiment is about: the objective and the actuators that it commands. */
  isMain: boolean;
}

/** Actuators that each Seek steers, by the step's id. */
export function seekActuators(graph: ExperimentGraph): ReadonlyMap<string, readonly string[]> {
  return new Map(
    graph.steps.flatMap((step) =>
      step.kind === 'seek'
        ? [[step.id, step.parameters.actuators.map(({ channel }) => channel)] as const]
        : [],
    ),
  );
}

/** The column that holds a Seek's estimate of an actuator; undefined where the run has none. */
export function findEstimate(
  columns: readonly RunColumn[],
  step: string,
  channel: string,
): string | undefined {
  // Runs of earlier releases, with one actuator, did not name it.
  const names = [estimateColumn(step, channel), earlierEstimateColumn(step)];
  return names.find((name) => columns.some((column) => column.name === name));
}

/**
 * The charts of a run: the objective; each actuator that the experiment commands, with what was applied and
 * where the law believes the best point to be; then each sensor and derived channel; traces have panels of their own. Channels that only the
 * rig host writes (a heartbeat) tell nothing and are left out.
 */
export function chartGroups(columns: readonly RunColumn[], rig: Rig, graph: ExperimentGraph): ChartGroup[] {
  const commanded = new Set(graph.steps.flatMap(commandedActuators).map(({ channel }) => channel));
  const actuators = rig.channels.filter(({ kind, id }) => kind === 'actuator' && commanded.has(id));
  const watched = rig.channels.filter(({ kind }) => kind === 'sensor' || kind === 'derived');
  return [
    ...objectiveGroup(columns),
    ...actuators.map((channel) => actuatorGroup(channel, columns, seekActuators(graph))),
    ...watched.map((channel) => ({
      title: channel.title,
      traces: [traceOf(channel, channel.id, channel.title, 0)],
      isMain: false,
    })),
  ];
}

function objectiveGroup(columns: readonly RunColumn[]): ChartGroup[] {
  const objective = columns.find((column) => column.kind === 'objective');
  if (!objective) return [];
  const trace = { column: objective.name, label: 'Objective', unit: objective.unit, decimals: 3, colour: 0 };
  return [{ title: 'Objective', traces: [trace], isMain: true }];
}

function actuatorGroup(
  channel: Channel,
  columns: readonly RunColumn[],
  actuatorsOfStep: ReadonlyMap<string, readonly string[]>,
): ChartGroup {
  const traces = [traceOf(channel, `${channel.id}.applied`, `${channel.title}, applied`, 0)];
  for (const [step, steered] of actuatorsOfStep) {
    const column = steered.includes(channel.id) ? findEstimate(columns, step, channel.id) : undefined;
    if (column === undefined) continue;
    traces.push(traceOf(channel, column, `${step}, estimate`, traces.length));
  }
  return { title: channel.title, traces, isMain: true };
}

function traceOf(channel: Channel, column: string, label: string, colour: number): ChartTrace {
  return { column, label, unit: channel.unit, decimals: channel.display.decimals, colour };
}
