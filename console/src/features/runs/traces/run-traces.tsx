import { useMemo, useState } from 'react';
import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import Slider from '@mui/material/Slider';
import { Loading, Panel, ProblemNotice } from '../../../components/index.js';
import { TraceHeatMap, TraceSheet, type TraceChannelLook } from '../../../components/trace-sheet/index.js';
import { scansPerRow, useScanTrace, useTraceChannels, useTraceStrip } from './trace-queries.js';

/** Scans that are drawn behind the picked one. */
const historyRows = 40;

interface RunTracesProps {
  runId: string;
  /** Scans that the finished run recorded. */
  scans: number;
}

/** The traces of a finished run: one panel per channel; nothing where it recorded none. */
export function RunTraces({ runId, scans }: RunTracesProps) {
  const channels = useTraceChannels(runId);
  if (channels.error !== null) {
    return (
      <ProblemNotice
        title="The traces could not be loaded"
        error={channels.error}
        onRetry={() => void channels.refetch()}
      />
    );
  }
  if (!channels.data || channels.data.length === 0 || scans === 0) return null;
  return (
    <Box sx={{ display: 'grid', gap: 2, gridTemplateColumns: 'minmax(0, 1fr)', mt: 2 }}>
      {channels.data.map((channel) => (
        <RunTracePanel key={channel.id} runId={runId} scans={scans} channel={channel} />
      ))}
    </Box>
  );
}

type RunTracePanelProps = RunTracesProps & { channel: TraceChannelLook & { id: string } };

function RunTracePanel({ runId, scans, channel }: RunTracePanelProps) {
  const [scan, setScan] = useState(scans);
  const [isFitted, setFitted] = useState(false);
  const picked = useScanTrace(runId, channel.id, scan);
  const every = scansPerRow(scans);
  const strip = useTraceStrip(runId, channel.id, every);
  const earlier = useMemo(() => {
    const before = (strip.data ?? []).filter((row) => row.scan < scan);
    return before.slice(-historyRows).map(({ trace }) => trace);
  }, [strip.data, scan]);
  const tS = picked.data?.tS ?? 0;
  return (
    <Panel
      title={channel.title}
      isFlush
      actions={
        <Button
          aria-pressed={isFitted}
          variant={isFitted ? 'contained' : 'outlined'}
          onClick={() => setFitted(!isFitted)}
        >
          Fit values
        </Button>
      }
    >
      {picked.error !== null && <ProblemNotice title="The trace could not be loaded" error={picked.error} />}
      {picked.isPending && <Loading what="trace" />}
      {picked.data && (
        <Box sx={{ opacity: picked.isPlaceholderData ? 0.6 : 1 }}>
          <TraceSheet channel={channel} newest={picked.data.trace} earlier={earlier} isFitted={isFitted} />
          {picked.data.trace === null && (
            <Box sx={{ px: 1.5, pb: 1, color: 'text.secondary' }}>The trace was not good in this scan.</Box>
          )}
        </Box>
      )}
      <ScanSlider scans={scans} scan={scan} tS={tS} onChange={setScan} />
      {strip.error !== null && <ProblemNotice title="The overview could not be loaded" error={strip.error} />}
      {strip.data && strip.data.length > 1 && (
        <TraceHeatMap {...{ channel, every, scans }} rows={strip.data} pickedScan={scan} onPick={setScan} />
      )}
    </Panel>
  );
}

interface ScanSliderProps {
  scans: number;
  scan: number;
  tS: number;
  onChange: (scan: number) => void;
}

/** Picks a scan of the run; arrows go by one, Page Up and Page Down by a fiftieth of the run. */
function ScanSlider({ scans, scan, tS, onChange }: ScanSliderProps) {
  const text = `scan ${scan} of ${scans}, ${tS.toFixed(2)} s`;
  return (
    <Box sx={{ px: 2.5, pb: 1, display: 'flex', flexWrap: 'wrap', alignItems: 'center', columnGap: 2 }}>
      <Slider
        aria-label="Scan of the run"
        getAriaValueText={() => text}
        min={1}
        max={scans}
        shiftStep={Math.max(1, Math.round(scans / 50))}
        value={scan}
        onChange={(_event, value) => onChange(value)}
        sx={{ flex: '1 1 12rem' }}
      />
      <Box sx={{ fontSize: '0.8125rem', fontVariantNumeric: 'tabular-nums' }}>{text}</Box>
    </Box>
  );
}
