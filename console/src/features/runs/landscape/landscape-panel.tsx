import { useMemo } from 'react';
import Box from '@mui/material/Box';
import type { ExperimentGraph, Rig, RunColumn, RunEvent } from '@cresthold/shared';
import { Panel, plainNumber } from '../../../components/index.js';
import { useRunSamples, type RunSamples } from '../api/run-queries.js';
import { findEstimate, seekActuators } from '../charts/chart-groups.js';
import { LandscapeChart } from './landscape-chart.js';
import { landscapeGrid } from './landscape-grid.js';
import { LandscapeMap } from './landscape-map.js';
import { landscapeActuators, seekBeganS, seekPath, seekPlane, surveyPoints } from './landscape-points.js';

interface LandscapePanelProps {
  runId: string;
  rig: Rig;
  graph: ExperimentGraph;
  columns: readonly RunColumn[];
  events: readonly RunEvent[];
  isLive: boolean;
}

/** The objective over one actuator or two as surveyed, and the way of the seek over it. */
export function LandscapePanel(props: LandscapePanelProps) {
  const [first, second] = landscapeActuators(props.graph);
  if (first === undefined) return null;
  if (second === undefined) return <Curve {...props} actuator={first} />;
  return <Plane {...props} first={first} second={second} />;
}

function Curve({ events, actuator, ...props }: LandscapePanelProps & { actuator: string }) {
  const { rig, columns } = props;
  const points = useMemo(() => surveyPoints(events, actuator), [events, actuator]);
  const way = useWay({ ...props, events }, [actuator]);
  const [estimate] = way.estimates;
  const path = way.samples && estimate !== undefined ? seekPath(way.samples, estimate) : [];
  return (
    <Panel title="Landscape">
      {points.length + path.length === 0 ? (
        <NothingYet />
      ) : (
        <>
          <LandscapeChart
            points={points}
            path={path}
            xLabel={channelLabel(rig, actuator)}
            yLabel={objectiveLabel(columns)}
            summary={landscapeSummary(points.length, path)}
          />
          <Key />
        </>
      )}
    </Panel>
  );
}

function Plane({ events, first, second, ...props }: LandscapePanelProps & { first: string; second: string }) {
  const { rig, columns } = props;
  const grid = useMemo(() => landscapeGrid(events, first, second), [events, first, second]);
  const way = useWay({ ...props, events }, [first, second]);
  const [x, y] = way.estimates;
  const path = way.samples && x !== undefined && y !== undefined ? seekPlane(way.samples, x, y) : [];
  const last = path.at(-1);
  const surveyed = `${grid?.objectives.filter((z) => z !== null).length ?? 0} places surveyed.`;
  const at = last ? ` The estimates are at ${plainNumber(last.x)} and ${plainNumber(last.y)}.` : '';
  return (
    <Panel title="Landscape">
      {grid === null && path.length === 0 ? (
        <NothingYet />
      ) : (
        <LandscapeMap
          grid={grid}
          path={path}
          xLabel={channelLabel(rig, first)}
          yLabel={channelLabel(rig, second)}
          objectiveLabel={objectiveLabel(columns)}
          summary={surveyed + at}
        />
      )}
    </Panel>
  );
}

/** What was recorded of the estimates of some actuators since the first Seek began, with the objective. */
function useWay(
  { runId, graph, columns, events, isLive }: LandscapePanelProps,
  actuators: readonly string[],
): { estimates: string[]; samples: RunSamples | undefined } {
  const fromS = seekBeganS(events);
  const step = [...seekActuators(graph)].find(([, steered]) =>
    actuators.every((one) => steered.includes(one)),
  )?.[0];
  const found = actuators.map((one) => (step === undefined ? undefined : findEstimate(columns, step, one)));
  const estimates = found.filter((name) => name !== undefined);
  const isAsked = fromS !== null && estimates.length === actuators.length;
  const asked = isAsked ? [...estimates, 'objective'] : [];
  const samples = useRunSamples(runId, { columns: asked, fromS, points: 300 }, isLive);
  return { estimates, samples: isAsked ? samples.data : undefined };
}

const withUnit = (title: string, unit: string) => (unit === '' ? title : `${title}, ${unit}`);

function channelLabel(rig: Rig, id: string): string {
  const channel = rig.channels.find((other) => other.id === id);
  return withUnit(channel?.title ?? id, channel?.unit ?? '');
}

function objectiveLabel(columns: readonly RunColumn[]): string {
  return withUnit('Objective', columns.find((column) => column.kind === 'objective')?.unit ?? '');
}

function NothingYet() {
  return <Box sx={{ color: 'text.secondary' }}>Nothing has been surveyed yet.</Box>;
}

function landscapeSummary(surveyed: number, path: readonly { value: number; objective: number }[]): string {
  const last = path.at(-1);
  const way = last
    ? ` The estimate is at ${plainNumber(last.value)} with an objective of ${plainNumber(last.objective)}.`
    : '';
  return `${surveyed} points surveyed.${way}`;
}

function Key() {
  return (
    <Box
      sx={{ display: 'flex', flexWrap: 'wrap', columnGap: 2, fontSize: '0.75rem', color: 'text.secondary' }}
    >
      <span>■ surveyed upwards</span>
      <span>× surveyed downwards</span>
      <span>○ not valid</span>
      <span>— way of the estimate</span>
      <span>+ where it is</span>
    </Box>
  );
}
