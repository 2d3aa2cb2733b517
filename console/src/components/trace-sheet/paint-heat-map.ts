import { fontFamily, type Paper } from '../../theme/index.js';
import { roundTicks } from '../chart-scale.js';
import { plainNumber } from '../format-quantity.js';
import { traceFrame } from './paint-traces.js';
import { placeAt, type PlacedTrace } from './placed-trace.js';

export interface TimedTrace {
  scan: number;
  /** Time since the run began, s. */
  tS: number;
  trace: PlacedTrace;
}

export interface HeatMap {
  /** In the order of time. */
  rows: readonly TimedTrace[];
  /** Values that are drawn as paper and as ink. */
  min: number;
  max: number;
  /** Which moment is picked, s; null for none. */
  pickedS: number | null;
}

/** Where a moment stands in the height of the map: the beginning at the top. */
export function shareOfTime(rows: readonly TimedTrace[], tS: number): number {
  const [first, last] = [rows[0]?.tS ?? 0, rows.at(-1)?.tS ?? 0];
  return last > first ? (tS - first) / (last - first) : 0;
}

/** Draws traces one below the other as strips of ink: the greater the value, the darker. */
export function paintHeatMap(
  context: CanvasRenderingContext2D,
  map: HeatMap,
  { width, height }: { width: number; height: number },
  paper: Paper,
): void {
  const { left, right, top } = traceFrame;
  const area = { left, top, width: width - left - right, height: height - top - 6 };
  context.clearRect(0, 0, width, height);
  const rowHeight = area.height / Math.max(1, map.rows.length);
  context.fillStyle = paper.ink;
  map.rows.forEach((row, index) => {
    paintRow(context, row.trace, map, { ...area, top: area.top + index * rowHeight, height: rowHeight });
  });
  context.globalAlpha = 1;
  paintTimes(context, map, area, paper);
}

interface Area {
  left: number;
  top: number;
  width: number;
  height: number;
}

/** One cell per pixel column at most, the greatest value of it. */
function paintRow(context: CanvasRenderingContext2D, trace: PlacedTrace, map: HeatMap, area: Area): void {
  const cells = Math.max(1, Math.min(Math.floor(area.width), trace.count));
  const greatest = new Float64Array(cells).fill(-Infinity);
  for (let i = 0; i < trace.points.length; i += 1) {
    const cell = Math.min(cells - 1, Math.floor((placeAt(trace, i) / trace.count) * cells));
    greatest[cell] = Math.max(greatest[cell]!, trace.points[i]!);
  }
  const cellWidth = area.width / cells;
  for (let cell = 0; cell < cells; cell += 1) {
    const share = (greatest[cell]! - map.min) / (map.max - map.min || 1);
    if (!(share > 0)) continue;
    context.globalAlpha = Math.min(1, share);
    // A little over its edges, so that no hairlines of paper show between cells.
    context.fillRect(area.left + cell * cellWidth, area.top, cellWidth + 0.5, area.height + 0.5);
  }
}

function paintTimes(context: CanvasRenderingContext2D, map: HeatMap, area: Area, paper: Paper): void {
  const { rows, pickedS } = map;
  const [first, last] = [rows[0]?.tS ?? 0, rows.at(-1)?.tS ?? 0];
  context.font = `11px ${fontFamily}`;
  context.fillStyle = paper.inkSoft;
  context.textAlign = 'right';
  const at = (tS: number) => area.top + shareOfTime(rows, tS) * area.height;
  for (const tick of last > first ? roundTicks(first, last, 5) : [first]) {
    context.fillText(`${plainNumber(tick)} s`, area.left - 6, Math.min(at(tick) + 4, area.top + area.height));
  }
  if (pickedS === null) return;
  context.strokeStyle = paper.act;
  context.lineWidth = 2;
  context.beginPath();
  context.moveTo(area.left, at(pickedS));
  context.lineTo(area.left + area.width, at(pickedS));
  context.stroke();
}
