import { useEffect, useState } from 'react';
import type { RigSamples } from '../../live/index.js';
import { formatNumber } from '../format-quantity.js';
import { extentSince } from './chart-window.js';
import type { ChartTrace } from './chart-trace.js';

/** What a live chart shows, in words: latest, least and greatest value of each trace. */
export function chartSummary(samples: RigSamples, traces: readonly ChartTrace[], spanS: number): string {
  const { ring } = samples;
  const fromMs = ring.timeAt(ring.length - 1) - spanS * 1000;
  return traces
    .map((trace) => {
      const unit = trace.unit === '' ? '' : ` ${trace.unit}`;
      const say = (value: number) => `${formatNumber(value, trace.decimals)}${unit}`;
      const latest = ring.latest(trace.column);
      const extent = extentSince(ring, trace.column, fromMs);
      if (!extent) return `${trace.label}: no values in the last ${spanS} s.`;
      const now = Number.isFinite(latest) ? `now ${say(latest)}` : 'no value now';
      return `${trace.label}: ${now}; last ${spanS} s from ${say(extent.least)} to ${say(extent.greatest)}.`;
    })
    .join(' ');
}

/** The summary, renewed every few seconds: often enough to be read, seldom enough to be heard. */
export function useChartSummary(samples: RigSamples, traces: readonly ChartTrace[], spanS: number): string {
  const [summary, setSummary] = useState(() => chartSummary(samples, traces, spanS));
  useEffect(() => {
    const renew = () => setSummary(chartSummary(samples, traces, spanS));
    renew();
    const timer = setInterval(renew, 3000);
    return () => clearInterval(timer);
  }, [samples, traces, spanS]);
  return summary;
}
