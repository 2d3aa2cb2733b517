import { useMemo } from 'react';
import Box from '@mui/material/Box';
import type { ExperimentGraph, Rig, RunColumn, RunEvent } from '@cresthold/shared';
import { Panel, plainNumber } from '../../../components/index.js';
import { useRunSamples } from '../api/run-queries.js';
import { findEstimate, seekActuators } from '../charts/chart-groups.js';
import { LandscapeChart } from './landscape-chart.js';
import { landscapeActuators, seekBeganS, seekPath, surveyPoints } from './landscape-points.js';

interface LandscapePanelProps {
  runId: string;
  rig: Rig;
  graph: ExperimentGraph;
  columns: readonly RunColumn[];
  events: readonly RunEvent[];
  isLive: boolean;
}

/** The objective over the actuator as surveyed, and the way of the seek over it. */
export function LandscapePanel(props: LandscapePanelProps) {
  const [actuator] = landscapeActuators(props.graph);
  if (actuator === undefined) return null;
  return <Landscape {...props} actuator={actuator} />;
}

function Landscape({
  runId,
  rig,
  graph,
  columns,
  events,
  isLive,
  actuator,
}: LandscapePanelProps & { actuator: string }) {
  const points = useMemo(() => surveyPoints(events, actuator), [events, actuator]);
  const fromS = seekBeganS(events);
  const step = [...seekActuators(graph)].find(([, steered]) => steered.includes(actuator))?.[0];
  const estimate = step === undefined ? undefined : findEstimate(columns, step, actuator);
  const asked = fromS === null || estimate === undefined ? [] : [estimate, 'objective'];
  const samples = useRunSamples(runId, { columns: asked, fromS, points: 300 }, isLive);
  const path =
    samples.data && estimate !== undefined && fromS !== null ? seekPath(samples.data, estimate) : [];
  const channel = rig.channels.find((other) => other.id === actuator);
  const objectiveUnit = columns.find((column) => column.kind === 'objective')?.unit ?? '';
  const label = (title: string, unit: string) => (unit === '' ? title : `${title}, ${unit}`);
  return (
    <Panel title="Landscape">
      {points.length + path.length === 0 ? (
        <Box sx={{ color: 'text.secondary' }}>Nothing has been surveyed yet.</Box>
      ) : (
        <>
          <LandscapeChart
            points={points}
            path={path}
            xLabel={label(channel?.title ?? actuator, channel?.unit ?? '')}
            yLabel={label('Objective', objectiveUnit)}
            summary={landscapeSummary(points.length, path)}
          />
          <Key />
        </>
      )}
    </Panel>
  );
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
