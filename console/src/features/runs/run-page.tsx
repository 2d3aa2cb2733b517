import { Link as RouterLink, useParams } from 'react-router-dom';
import Box from '@mui/material/Box';
import Link from '@mui/material/Link';
import type { ExperimentGraph, Rig, RunEvent } from '@cresthold/shared';
import type { RunSummary } from '../../api/index.js';
import { formatMoment, Loading, Notice, Page, Panel, ProblemNotice } from '../../components/index.js';
import { useRigSamples, useRigStatus } from '../../live/index.js';
import { GraphDrawing, useExperimentVersion } from '../experiments/index.js';
import { LiveTraces, useRig, useShowsRig } from '../rigs/index.js';
import { useFollowRun } from './api/follow-run.js';
import { isEnded, useRun, useRunColumns, useRunEventList } from './api/run-queries.js';
import { RunCharts } from './charts/run-charts.js';
import { EventPanel } from './event-panel.js';
import { LandscapePanel } from './landscape/landscape-panel.js';
import { ResultPanel } from './result-panel.js';
import { RunActions } from './run-actions.js';
import { RunStatusMark } from './run-status-mark.js';
import { RunTraces } from './traces/run-traces.js';

/** One run: its graph with the active step, what was recorded, the landscape, events and results. */
export function RunPage() {
  const { runId = '' } = useParams();
  const run = useRun(runId);
  if (run.data) return <LoadedRun run={run.data} />;
  return <Waiting error={run.error} onRetry={() => void run.refetch()} />;
}

function LoadedRun({ run }: { run: RunSummary }) {
  const version = useExperimentVersion(run.experimentId, run.experimentVersion);
  const rig = useRig(run.rigId);
  useShowsRig(run.rigId);
  if (version.data && rig.data) {
    return <RunView run={run} graph={version.data.content.graph} rig={rig.data.content} />;
  }
  return <Waiting error={version.error ?? rig.error} onRetry={() => void version.refetch()} />;
}

function Waiting({ error, onRetry }: { error: unknown; onRetry: () => void }) {
  return (
    <Page title="Run">
      {error === null ? (
        <Loading what="run" />
      ) : (
        <ProblemNotice title="The run could not be loaded" error={error} onRetry={onRetry} />
      )}
    </Page>
  );
}

interface RunViewProps {
  run: RunSummary;
  graph: ExperimentGraph;
  rig: Rig;
}

const noEvents: RunEvent[] = [];

function RunView({ run, graph, rig }: RunViewProps) {
  useRigSamples(rig.id);
  useFollowRun(run.id);
  const status = useRigStatus(rig.id);
  const isLive = !isEnded(run.status);
  const columns = useRunColumns(run.id);
  const list = useRunEventList(run.id);
  const events = list.data ?? noEvents;
  const activeSteps = isLive && status?.runId === run.id ? status.activeSteps : [];
  return (
    <Page
      title={run.experimentTitle}
      trail={<Trail run={run} rig={rig} />}
      aside={<RunStatusMark status={run.status} verdict={run.verdict} />}
      actions={<RunActions run={run} />}
    >
      {(run.status === 'tripped' || run.status === 'interrupted') && (
        <Notice
          kind={run.status === 'tripped' ? 'trip' : 'warn'}
          title={run.status === 'tripped' ? 'The rig tripped' : 'The run was interrupted'}
        >
          {run.reason}
        </Notice>
      )}
      <Panel title="Experiment" isFlush>
        <GraphDrawing graph={graph} rig={rig} activeSteps={activeSteps} heightPx={240} />
      </Panel>
      <Box sx={runGrid}>
        <Box sx={{ minWidth: 0, order: { xs: 1, lg: 0 } }}>
          {columns.error !== null && (
            <ProblemNotice title="The columns could not be loaded" error={columns.error} />
          )}
          {columns.data && (
            <RunCharts
              {...{ rig, graph, isLive }}
              runId={run.id}
              columns={columns.data}
              endS={(run.scans * rig.periodMs) / 1000}
            />
          )}
          {isLive ? <LiveTraces rig={rig} /> : <RunTraces runId={run.id} scans={run.scans} />}
        </Box>
        <Box sx={{ display: 'grid', gap: 2, minWidth: 0, gridTemplateColumns: 'minmax(0, 1fr)' }}>
          {columns.data && (
            <LandscapePanel {...{ rig, graph, events, isLive }} runId={run.id} columns={columns.data} />
          )}
          <ResultPanel run={run} events={events} />
          {list.error !== null && <ProblemNotice title="The events could not be loaded" error={list.error} />}
          <EventPanel events={events} />
        </Box>
      </Box>
    </Page>
  );
}

const runGrid = {
  display: 'grid',
  gap: 2,
  alignItems: 'start',
  gridTemplateColumns: { xs: 'minmax(0, 1fr)', lg: 'minmax(0, 1fr) minmax(22rem, 32rem)' },
};

function Trail({ run, rig }: { run: RunSummary; rig: Rig }) {
  return (
    <>
      Run on{' '}
      <Link component={RouterLink} to={`/rigs/${rig.id}`}>
        {rig.title}
      </Link>
      {' of '}
      <Link component={RouterLink} to={`/experiments/${run.experimentId}?version=${run.experimentVersion}`}>
        version {run.experimentVersion}
      </Link>
      {`, under envelope version ${run.envelopeVersion}, started ${formatMoment(run.startedAt)} by ${run.startedBy}`}
      {run.endedAt !== null && `, ended ${formatMoment(run.endedAt)}`}
    </>
  );
}
