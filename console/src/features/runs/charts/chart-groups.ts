import {
  commandedActuators,
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

/** The actuator that each Seek steers, by the step's id. */
export function seekActuators(graph: ExperimentGraph): ReadonlyMap<string, string> {
  return new Map(
    graph.steps.flatMap((step) =>
      step.kind === 'seek' ? [[step.id, step.parameters.actuator] as [string, string]] : [],
    ),
  );
}

/**
 * The charts of a run: the objective; each actuator that the experiment commands, with what was applied and
 * where the law believes the best point to be; then each sensor and derived channel. Channels that only the
 * rig host writes (a heartbeat) tell nothing and are left out.
 */
export function chartGroups(columns: readonly RunColumn[], rig: Rig, graph: ExperimentGraph): ChartGroup[] {
  const commanded = new Set(graph.steps.flatMap(commandedActuators).map(({ channel }) => channel));
  const actuators = rig.channels.filter(({ kind, id }) => kind === 'actuator' && commanded.has(id));
  const watched = rig.channels.filter(({ kind }) => kind !== 'actuator');
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
  actuatorOfStep: ReadonlyMap<string, string>,
): ChartGroup {
  const traces = [traceOf(channel, `${channel.id}.applied`, `${channel.title}, applied`, 0)];
  for (const [step, actuator] of actuatorOfStep) {
    const column = `${step}.estimate`;
    if (actuator !== channel.id || !columns.some(({ name }) => name === column)) continue;
    traces.push(traceOf(channel, column, `${step}, estimate`, traces.length));
  }
  return { title: channel.title, traces, isMain: true };
}

function traceOf(channel: Channel, column: string, label: string, colour: number): ChartTrace {
  return { column, label, unit: channel.unit, decimals: channel.display.decimals, colour };
}
