export type { TimedTrace } from './paint-heat-map.js';
export { wholeTrace, type PlacedTrace } from './placed-trace.js';
export { TraceHeatMap } from './trace-heat-map.js';
export { TraceSheet, type TraceChannelLook } from './trace-sheet.js';
