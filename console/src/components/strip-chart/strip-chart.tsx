import { useMemo } from 'react';
import { useIsStale, useLatestValue, type RigSamples } from '../../live/index.js';
import { usePaper } from '../../theme/index.js';
import { Quantity } from '../quantity.js';
import { ChartSheet } from './chart-sheet.js';
import type { ChartLevel, ChartRange, ChartTrace } from './chart-trace.js';
import { TraceKey } from './trace-key.js';
import { useChartSummary } from './use-chart-summary.js';
import { useLiveDrawing } from './use-live-drawing.js';
import { useUplot } from './use-uplot.js';

export interface StripChartProps {
  samples: RigSamples;
  /** Keep the list's identity while it is the same: a new one makes the chart anew. */
  traces: readonly ChartTrace[];
  levels?: readonly ChartLevel[];
  /** Range of the value axis; null fits it to what is drawn. */
  range: ChartRange | null;
  spanS: number;
  isPaused: boolean;
  heightPx?: number;
}

const noLevels: readonly ChartLevel[] = [];

/** The last seconds of live samples as a line on moving paper, with the newest values in its head. */
export function StripChart({
  samples,
  traces,
  levels = noLevels,
  range,
  spanS,
  isPaused,
  heightPx = 132,
}: StripChartProps) {
  const paper = usePaper();
  const isStale = useIsStale(samples);
  const look = useMemo(
    () => ({ traces, levels, range, xAxis: 'clock' as const, paper }),
    [traces, levels, range, paper],
  );
  const columns = useMemo(() => traces.map((trace) => trace.column), [traces]);
  const { frameRef, chart } = useUplot(look, heightPx);
  useLiveDrawing(chart, { samples, columns, spanS, isPaused });
  const summary = useChartSummary(samples, traces, spanS);
  return (
    <ChartSheet
      heading={traces.map((trace) => (
        <TraceKey key={trace.column} trace={trace}>
          <LatestValue samples={samples} trace={trace} isStale={isStale} />
        </TraceKey>
      ))}
      summary={isPaused ? `Paused. ${summary}` : summary}
      frameRef={frameRef}
      heightPx={heightPx}
      isStale={isStale && !isPaused}
    />
  );
}

function LatestValue({
  samples,
  trace,
  isStale,
}: {
  samples: RigSamples;
  trace: ChartTrace;
  isStale: boolean;
}) {
  const value = useLatestValue(samples, trace.column);
  return <Quantity value={value} unit={trace.unit} decimals={trace.decimals} isStale={isStale} />;
}
