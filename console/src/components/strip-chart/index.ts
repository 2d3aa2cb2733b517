export type { ChartLevel, ChartRange, ChartTrace } from './chart-trace.js';
export { StripChart, type StripChartProps } from './strip-chart.js';
export { TraceChart, type TraceChartProps } from './trace-chart.js';
export { TraceKey } from './trace-key.js';
