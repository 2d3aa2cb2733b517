import type { Rig, RunColumn } from '@cresthold/shared';
import type { ChartTrace } from '../../../components/strip-chart/index.js';

/** One sheet of the run's charts. */
export interface ChartGroup {
  title: string;
  traces: ChartTrace[];
}

/**
 * The charts of a run: the objective; each actuator with what was applied and where the law believes the
 * best point to be; then each sensor and derived channel.
 */
export function chartGroups(
  columns: readonly RunColumn[],
  rig: Rig,
  actuatorOfStep: ReadonlyMap<string, string>,
): ChartGroup[] {
  const has = (name: string) => columns.some((column) => column.name === name);
  const decimals = (channel: string) =>
    rig.channels.find((other) => other.id === channel)?.display.decimals ?? 3;
  const groups: ChartGroup[] = [];
  const objective = columns.find((column) => column.kind === 'objective');
  if (objective) {
    groups.push({
      title: 'Objective',
      traces: [{ column: objective.name, label: 'Objective', unit: objective.unit, decimals: 3, colour: 0 }],
    });
  }
  for (const channel of rig.channels) {
    const trace = { unit: channel.unit, decimals: decimals(channel.id) };
    if (channel.kind !== 'actuator') {
      groups.push({
        title: channel.title,
        traces: [{ column: channel.id, label: channel.title, colour: 0, ...trace }],
      });
    } else if (has(`${channel.id}.applied`)) {
      const traces: ChartTrace[] = [
        { column: `${channel.id}.applied`, label: `${channel.title}, applied`, colour: 0, ...trace },
      ];
      for (const [step, actuator] of actuatorOfStep) {
        const column = `${step}.estimate`;
        if (actuator !== channel.id || !has(column)) continue;
        traces.push({ column, label: `${step}, estimate`, colour: traces.length, ...trace });
      }
      groups.push({ title: channel.title, traces });
    }
  }
  return groups.sort((a, b) => rank(a) - rank(b));
}

/** Objective and actuators before what is only watched. */
function rank(group: ChartGroup): number {
  if (group.title === 'Objective') return 0;
  return group.traces[0]?.column.endsWith('.applied') ? 1 : 2;
}
