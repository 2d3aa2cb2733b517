import { useCallback, useMemo } from 'react';
import Box from '@mui/material/Box';
import type { TraceAxis } from '@cresthold/shared';
import { usePaper } from '../../theme/index.js';
import { paintTraces } from './paint-traces.js';
import { extremesOf, titleWithUnit, traceSummary, type PlacedTrace } from './placed-trace.js';
import { bandOf } from './trace-band.js';
import { useCanvas, type Paint } from './use-canvas.js';

/** Earlier traces that are drawn one by one; all of them make the band. */
const historyShown = 12;
const stretches = 240;

/** What a sheet needs to know of its channel. */
export interface TraceChannelLook {
  title: string;
  unit: string;
  display: { min: number; max: number; decimals: number };
  axis: TraceAxis;
}

export interface TraceSheetProps {
  channel: TraceChannelLook;
  newest: PlacedTrace | null;
  /** Earlier ones, the oldest first; keep the list's identity while it is the same. */
  earlier: readonly PlacedTrace[];
  /** Fit the value axis to what is drawn, not to the display range. */
  isFitted?: boolean;
  isStale?: boolean;
  heightPx?: number;
}

/** A trace over its axis, with those before it faint behind it and the band that they stayed in. */
export function TraceSheet({
  channel,
  newest,
  earlier,
  isFitted = false,
  isStale = false,
  heightPx = 240,
}: TraceSheetProps) {
  const paper = usePaper();
  const { axis, display, unit, title } = channel;
  const drawing = useMemo(() => {
    const all = newest ? [...earlier, newest] : earlier;
    const count = newest?.count ?? earlier.at(-1)?.count ?? 1;
    // Traces of another length stand elsewhere on the axis.
    const comparable = earlier.filter((trace) => trace.count === count);
    return {
      newest,
      history: comparable.slice(-historyShown),
      band: comparable.length > 0 ? bandOf([...comparable, ...(newest ? [newest] : [])], stretches) : null,
      from: axis.from,
      to: axis.from + axis.step * (count - 1),
      ...valueRange(all, isFitted ? null : display),
      xTitle: titleWithUnit(axis.title, axis.unit),
    };
  }, [newest, earlier, axis, display, isFitted]);
  const paint = useCallback<Paint>(
    (context, size) => paintTraces(context, drawing, size, paper),
    [drawing, paper],
  );
  const canvasRef = useCanvas(paint, heightPx);
  const summary = newest ? traceSummary(newest, axis, unit, display.decimals) : 'No trace yet.';
  return (
    <Box sx={{ minWidth: 0 }}>
      <Box sx={{ px: 1.5, pt: 1, fontSize: '0.75rem', color: 'text.secondary' }}>
        {titleWithUnit(title, unit)}
      </Box>
      <Box
        role="img"
        aria-label={`${title} over ${axis.title}. ${summary}`}
        sx={{ minWidth: 0, height: heightPx, opacity: isStale ? 0.45 : 1 }}
      >
        <canvas ref={canvasRef} style={{ display: 'block' }} />
      </Box>
      <Box sx={{ px: 1.5, pb: 1, fontSize: '0.8125rem' }}>{summary}</Box>
    </Box>
  );
}

/** The display range, widened where values leave it; or one that fits with a little air. */
function valueRange(traces: readonly PlacedTrace[], display: { min: number; max: number } | null) {
  const extremes = traces.flatMap((trace) => extremesOf(trace) ?? []);
  const least = Math.min(...extremes.map((e) => e.least));
  const greatest = Math.max(...extremes.map((e) => e.greatest));
  if (display) return { min: Math.min(display.min, least), max: Math.max(display.max, greatest) };
  if (extremes.length === 0) return { min: 0, max: 1 };
  const air = (greatest - least) * 0.1 || Math.abs(greatest) * 0.05 || 1;
  return { min: least - air, max: greatest + air };
}
