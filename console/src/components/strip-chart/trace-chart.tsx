import { useEffect, useMemo, type ReactNode } from 'react';
import type uPlot from 'uplot';
import { usePaper } from '../../theme/index.js';
import { ChartSheet } from './chart-sheet.js';
import type { ChartLevel, ChartRange, ChartTrace } from './chart-trace.js';
import { TraceKey } from './trace-key.js';
import { useUplot } from './use-uplot.js';

export interface TraceChartProps {
  traces: readonly ChartTrace[];
  /** Time since a start, s, ascending. */
  timesS: readonly number[];
  /** One list per trace, null where there is no good value. */
  values: readonly (readonly (number | null)[])[];
  levels?: readonly ChartLevel[];
  range: ChartRange | null;
  /** What the chart shows, in words. */
  summary: string;
  /** Beside the name of each trace, e.g. its mean. */
  readingOf?: (trace: ChartTrace) => ReactNode;
  heightPx?: number;
}

const noLevels: readonly ChartLevel[] = [];

/** Recorded samples over seconds from a start, on the same paper as the live ones. */
export function TraceChart({
  traces,
  timesS,
  values,
  levels = noLevels,
  range,
  summary,
  readingOf,
  heightPx = 160,
}: TraceChartProps) {
  const paper = usePaper();
  const look = useMemo(
    () => ({ traces, levels, range, xAxis: 'seconds' as const, paper }),
    [traces, levels, range, paper],
  );
  const { frameRef, chart } = useUplot(look, heightPx);
  useEffect(() => {
    if (!chart || timesS.length === 0) return;
    chart.batch(() => {
      chart.setData([timesS, ...values] as unknown as uPlot.AlignedData, false);
      chart.setScale('x', { min: timesS[0] ?? 0, max: timesS[timesS.length - 1] ?? 1 });
    });
  }, [chart, timesS, values]);
  return (
    <ChartSheet
      heading={traces.map((trace) => (
        <TraceKey key={trace.column} trace={trace}>
          {readingOf?.(trace)}
        </TraceKey>
      ))}
      summary={summary}
      frameRef={frameRef}
      heightPx={heightPx}
    />
  );
}
