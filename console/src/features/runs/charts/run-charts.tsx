import { useMemo, useState } from 'react';
import { useSearchParams } from 'react-router-dom';
import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import MenuItem from '@mui/material/MenuItem';
import TextField from '@mui/material/TextField';
import Typography from '@mui/material/Typography';
import type { ExperimentGraph, Rig, RunColumn } from '@cresthold/shared';
import { formatNumber, Loading, plainNumber, ProblemNotice } from '../../../components/index.js';
import { TraceChart } from '../../../components/strip-chart/index.js';
import { useRunSamples, type RunSamples } from '../api/run-queries.js';
import { chartGroups, type ChartGroup } from './chart-groups.js';
import { chartRows } from './chart-rows.js';

const spansS = [10, 60, 300, 1800];
const wholeRun = 0;
/** From a little before the moment that a link names to the end. */
const fromMoment = -1;
const beforeMomentS = 5;

interface RunChartsProps {
  runId: string;
  rig: Rig;
  graph: ExperimentGraph;
  columns: readonly RunColumn[];
  /** Time since the run began, s; where the newest sample is. */
  endS: number;
  isLive: boolean;
}

/** What was recorded, over the whole run or its end; exact where there are few enough samples. */
export function RunCharts({ runId, rig, graph, columns, endS, isLive }: RunChartsProps) {
  const momentS = useMomentS();
  const [spanS, setSpanS] = useState(momentS === null ? wholeRun : fromMoment);
  const [isAll, setAll] = useState(false);
  const groups = useMemo(() => chartGroups(columns, rig, graph), [columns, rig, graph]);
  const shown = useMemo(() => shownGroups(groups, isAll), [groups, isAll]);
  const asked = useMemo(() => shown.flatMap((group) => group.traces.map((trace) => trace.column)), [shown]);
  // Whole seconds, so that the address does not change with every sample.
  const fromS = fromOf(spanS, momentS, endS);
  const samples = useRunSamples(runId, { columns: asked, fromS, points: 600 }, isLive);
  return (
    <Box component="section" aria-labelledby="recorded-heading" sx={{ display: 'grid', gap: 1, minWidth: 0 }}>
      <Box sx={{ display: 'flex', flexWrap: 'wrap', alignItems: 'center', gap: 1 }}>
        <Typography id="recorded-heading" variant="h2" sx={{ flex: '1 1 8rem' }}>
          Recorded
        </Typography>
        <Button
          aria-pressed={isAll}
          variant={isAll ? 'contained' : 'outlined'}
          onClick={() => setAll(!isAll)}
        >
          Every channel
        </Button>
        <TextField
          select
          label="Span"
          value={spanS}
          onChange={(event) => setSpanS(Number(event.target.value))}
          sx={{ width: '9rem' }}
        >
          <MenuItem value={wholeRun}>whole run</MenuItem>
          {momentS !== null && <MenuItem value={fromMoment}>from {plainNumber(momentS)} s</MenuItem>}
          {spansS.map((span) => (
            <MenuItem key={span} value={span}>
              last {span < 120 ? `${span} s` : `${span / 60} min`}
            </MenuItem>
          ))}
        </TextField>
      </Box>
      {samples.isPending && <Loading what="samples" />}
      {samples.error !== null && (
        <ProblemNotice
          title="The samples could not be loaded"
          error={samples.error}
          onRetry={() => void samples.refetch()}
        />
      )}
      {samples.data && (
        <Box
          sx={{
            display: 'grid',
            gap: 1,
            gridTemplateColumns: 'repeat(auto-fill, minmax(min(100%, 26rem), 1fr))',
          }}
        >
          {shown.map((group) => (
            <GroupChart key={group.title} group={group} samples={samples.data} />
          ))}
        </Box>
      )}
    </Box>
  );
}

/** The moment that a link to this run names, s since it began. */
function useMomentS(): number | null {
  const [search] = useSearchParams();
  const text = search.get('atS');
  const momentS = Number(text);
  return text === null || !(momentS >= 0) ? null : momentS;
}

function fromOf(spanS: number, momentS: number | null, endS: number): number | null {
  if (spanS === wholeRun) return null;
  const fromS = spanS === fromMoment ? (momentS ?? 0) - beforeMomentS : Math.floor(endS) - spanS;
  return Math.max(0, fromS);
}

function GroupChart({ group, samples }: { group: ChartGroup; samples: RunSamples }) {
  const rows = useMemo(
    () =>
      chartRows(
        samples,
        group.traces.map((trace) => trace.column),
      ),
    [samples, group],
  );
  return (
    <TraceChart
      traces={group.traces}
      timesS={rows.timesS}
      values={rows.values}
      range={null}
      summary={chartSummary(group, samples)}
    />
  );
}

function chartSummary(group: ChartGroup, samples: RunSamples): string {
  const parts = group.traces.map((trace) => {
    const values =
      samples.mean[samples.columns.indexOf(trace.column)]?.filter((value) => value !== null) ?? [];
    const last = values.at(-1);
    return `${trace.label}: ${formatNumber(values[0], trace.decimals)} at the beginning, ${formatNumber(last, trace.decimals)} ${trace.unit} at the end`;
  });
  return `${parts.join('; ')}.`;
}

/** What the experiment is about, or everything where it is about nothing that is recorded. */
function shownGroups(groups: readonly ChartGroup[], isAll: boolean): readonly ChartGroup[] {
  const main = groups.filter((group) => group.isMain);
  return isAll || main.length === 0 ? groups : main;
}
