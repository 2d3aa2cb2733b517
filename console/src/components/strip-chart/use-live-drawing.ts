import { useEffect } from 'react';
import type uPlot from 'uplot';
import type { RigSamples } from '../../live/index.js';
import { chartWindow } from './chart-window.js';

interface LiveDrawing {
  samples: RigSamples;
  columns: readonly string[];
  spanS: number;
  isPaused: boolean;
}

/** After this without samples the paper stops moving, ms. */
const standstillMs = 2000;

/** Draws the last span of the samples in every animation frame in which anything would look different. */
export function useLiveDrawing(
  chart: uPlot | null,
  { samples, columns, spanS, isPaused }: LiveDrawing,
): void {
  useEffect(() => {
    if (!chart || isPaused) return;
    let frame = 0;
    let [drawnVersion, drawnEndMs] = [-1, 0];
    const draw = () => {
      frame = requestAnimationFrame(draw);
      const endMs = Math.max(drawnEndMs, endOfPaper(samples));
      const msPerPixel = (spanS * 1000) / Math.max(1, chart.width);
      const isSame = samples.ring.version === drawnVersion && endMs - drawnEndMs < msPerPixel / 2;
      if (isSame || samples.ring.length === 0) return;
      [drawnVersion, drawnEndMs] = [samples.ring.version, endMs];
      drawSpan(chart, samples, columns, endMs, spanS);
    };
    draw();
    return () => cancelAnimationFrame(frame);
  }, [chart, samples, columns, spanS, isPaused]);
}

/** The newest sample's time, carried on by the browser's clock between batches. */
function endOfPaper(samples: RigSamples): number {
  const newestMs = samples.ring.timeAt(samples.ring.length - 1);
  return newestMs + Math.min(standstillMs, Math.max(0, Date.now() - samples.receivedAtMs));
}

function drawSpan(
  chart: uPlot,
  samples: RigSamples,
  columns: readonly string[],
  endMs: number,
  spanS: number,
): void {
  const fromMs = endMs - spanS * 1000;
  const rows = chartWindow(samples.ring, columns, { fromMs, toMs: endMs, maxPoints: chart.width });
  chart.batch(() => {
    chart.setData(rows, false);
    chart.setScale('x', { min: fromMs / 1000, max: endMs / 1000 });
  });
}
