import { useCallback, useMemo, type MouseEvent } from 'react';
import Box from '@mui/material/Box';
import { usePaper } from '../../theme/index.js';
import { paintHeatMap, type TimedTrace } from './paint-heat-map.js';
import { traceFrame } from './paint-traces.js';
import { extremesOf } from './placed-trace.js';
import { useCanvas, type Paint } from './use-canvas.js';

interface TraceHeatMapProps {
  /** In the order of time; keep the list's identity while it is the same. */
  rows: readonly TimedTrace[];
  pickedS: number;
  /** With the mouse; the keyboard has the slider for it. */
  onPick: (row: TimedTrace) => void;
  heightPx?: number;
}

/** Traces over time, the greater the value the darker, with the picked moment as a line. */
export function TraceHeatMap({ rows, pickedS, onPick, heightPx = 180 }: TraceHeatMapProps) {
  const paper = usePaper();
  const range = useMemo(() => {
    const extremes = rows.flatMap(({ trace }) => extremesOf(trace) ?? []);
    return {
      min: Math.min(...extremes.map((e) => e.least)),
      max: Math.max(...extremes.map((e) => e.greatest)),
    };
  }, [rows]);
  const paint = useCallback<Paint>(
    (context, size) => paintHeatMap(context, { rows, ...range, pickedS }, size, paper),
    [rows, range, pickedS, paper],
  );
  const canvasRef = useCanvas(paint, heightPx);
  const pick = (event: MouseEvent<HTMLElement>) => {
    const { top } = event.currentTarget.getBoundingClientRect();
    const share = (event.clientY - top - traceFrame.top) / (heightPx - traceFrame.top - 6);
    const row = rows[Math.min(rows.length - 1, Math.max(0, Math.floor(share * rows.length)))];
    if (row) onPick(row);
  };
  return (
    <Box
      role="img"
      aria-label={`${rows.length} traces of the run one below the other, from ${rows[0]?.tS.toFixed(1) ?? 0} s to ${rows.at(-1)?.tS.toFixed(1) ?? 0} s; greater values are darker.`}
      onClick={pick}
      sx={{ minWidth: 0, height: heightPx, cursor: 'pointer' }}
    >
      <canvas ref={canvasRef} style={{ display: 'block' }} />
    </Box>
  );
}
