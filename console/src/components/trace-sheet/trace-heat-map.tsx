import { useCallback, useMemo, type MouseEvent } from 'react';
import Box from '@mui/material/Box';
import { usePaper } from '../../theme/index.js';
import { formatNumber } from '../format-quantity.js';
import { heatMapBottom, paintHeatMap, type TimedTrace } from './paint-heat-map.js';
import { traceFrame } from './paint-traces.js';
import { extremesOf, withUnit } from './placed-trace.js';
import type { TraceChannelLook } from './trace-sheet.js';
import { useCanvas, type Paint } from './use-canvas.js';

interface TraceHeatMapProps {
  channel: TraceChannelLook;
  /** In the order of time; keep the list's identity while it is the same. */
  rows: readonly TimedTrace[];
  /** One row for every so many scans. */
  every: number;
  scans: number;
  pickedScan: number;
  /** With the mouse; the keyboard has the slider for it. */
  onPick: (scan: number) => void;
  heightPx?: number;
}

/** Traces over time, the greater the value the more ink, with the picked scan as a line. */
export function TraceHeatMap(props: TraceHeatMapProps) {
  const { channel, rows, every, scans, pickedScan, onPick, heightPx = 180 } = props;
  const paper = usePaper();
  const range = useMemo(() => {
    const extremes = rows.flatMap(({ trace }) => extremesOf(trace) ?? []);
    return {
      min: Math.min(...extremes.map((e) => e.least)),
      max: Math.max(...extremes.map((e) => e.greatest)),
    };
  }, [rows]);
  const paint = useCallback<Paint>(
    (context, size) => paintHeatMap(context, { rows, every, scans, ...range, pickedScan }, size, paper),
    [rows, every, scans, range, pickedScan, paper],
  );
  const canvasRef = useCanvas(paint, heightPx);
  const pick = (event: MouseEvent<HTMLElement>) => {
    const { top } = event.currentTarget.getBoundingClientRect();
    const share = (event.clientY - top - traceFrame.top) / (heightPx - traceFrame.top - heatMapBottom);
    onPick(Math.min(scans, Math.max(1, Math.ceil(share * scans))));
  };
  const value = (number: number) => withUnit(formatNumber(number, channel.display.decimals), channel.unit);
  const key = `Each line a trace, the run from top to bottom; bare paper is ${value(range.min)}, full ink ${value(range.max)}.`;
  return (
    <Box sx={{ minWidth: 0 }}>
      <Box
        role="img"
        aria-label={`${channel.title}: ${rows.length} traces over the run. ${key}`}
        onClick={pick}
        sx={{ minWidth: 0, height: heightPx, cursor: 'pointer' }}
      >
        <canvas ref={canvasRef} style={{ display: 'block' }} />
      </Box>
      <Box sx={{ px: 1.5, pb: 1, fontSize: '0.75rem', color: 'text.secondary' }}>{key}</Box>
    </Box>
  );
}
