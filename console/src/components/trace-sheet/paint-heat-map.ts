import { fontFamily, type Paper } from '../../theme/index.js';
import { roundTicks } from '../chart-scale.js';
import { plainNumber } from '../format-quantity.js';
import { traceFrame } from './paint-traces.js';
import { placeAt, type PlacedTrace } from './placed-trace.js';

export interface TimedTrace {
  /** Number of the scan in the run, from 1. */
  scan: number;
  /** Time since the run began, s. */
  tS: number;
  trace: PlacedTrace;
}

export interface HeatMap {
  /** In the order of time, one for every so many scans; none where a trace was not good. */
  rows: readonly TimedTrace[];
  every: number;
  /** Scans of the run. */
  scans: number;
  /** Values that are drawn as bare paper and as full ink. */
  min: number;
  max: number;
  pickedScan: number;
}

/** Room below the strips, px. */
export const heatMapBottom = 6;
/** Cells across: more cannot be told apart. */
const cellsMax = 1024;

interface Area {
  left: number;
  top: number;
  width: number;
  height: number;
}

/** Draws traces one below the other as strips of ink: the greater the value, the more ink. */
export function paintHeatMap(
  context: CanvasRenderingContext2D,
  map: HeatMap,
  { width, height }: { width: number; height: number },
  paper: Paper,
): void {
  const { left, right, top } = traceFrame;
  const area = { left, top, width: width - left - right, height: height - top - heatMapBottom };
  context.clearRect(0, 0, width, height);
  const strips = inkStrips(map, paper);
  context.imageSmoothingEnabled = false;
  if (strips) context.drawImage(strips, area.left, area.top, area.width, area.height);
  paintTimes(context, map, area, paper);
  paintPicked(context, map, area, paper);
}

/** One pixel per cell, to be stretched over the area; null where the browser gives no canvas. */
function inkStrips({ rows, every, scans, min, max }: HeatMap, paper: Paper): HTMLCanvasElement | null {
  const canvas = document.createElement('canvas');
  canvas.width = Math.min(cellsMax, Math.max(1, ...rows.map(({ trace }) => trace.count)));
  canvas.height = Math.ceil(scans / every);
  const context = canvas.getContext('2d');
  if (!context) return null;
  const image = context.createImageData(canvas.width, canvas.height);
  for (const { scan, trace } of rows) {
    const row = Math.floor((scan - 1) / every) * canvas.width;
    for (let i = 0; i < trace.points.length; i += 1) {
      const cell = row + Math.floor((placeAt(trace, i) / trace.count) * canvas.width);
      const opacity = Math.round((255 * (trace.points[i]! - min)) / (max - min || 1));
      image.data[4 * cell + 3] = Math.max(image.data[4 * cell + 3] ?? 0, opacity);
    }
  }
  context.putImageData(image, 0, 0);
  context.globalCompositeOperation = 'source-in';
  context.fillStyle = paper.ink;
  context.fillRect(0, 0, canvas.width, canvas.height);
  return canvas;
}

/** Times by the first and the last trace: scans are evenly apart but for late ones. */
function paintTimes(context: CanvasRenderingContext2D, map: HeatMap, area: Area, paper: Paper): void {
  const [first, last] = [map.rows[0], map.rows.at(-1)];
  if (!first || !last || last.scan === first.scan) return;
  const sPerScan = (last.tS - first.tS) / (last.scan - first.scan);
  const beginS = first.tS - (first.scan - 1) * sPerScan;
  context.font = `11px ${fontFamily}`;
  context.fillStyle = paper.inkSoft;
  context.textAlign = 'right';
  for (const tick of roundTicks(beginS, beginS + map.scans * sPerScan, 5)) {
    const share = (tick - beginS) / (map.scans * sPerScan);
    const y = Math.min(Math.max(area.top + share * area.height + 4, area.top + 8), area.top + area.height);
    context.fillText(`${plainNumber(tick)} s`, area.left - 6, y);
  }
}

/** A line of ink on bare paper, seen on light and dark strips alike. */
function paintPicked(context: CanvasRenderingContext2D, map: HeatMap, area: Area, paper: Paper): void {
  const y = area.top + ((map.pickedScan - 0.5) / map.scans) * area.height;
  context.fillStyle = paper.sheet;
  context.fillRect(area.left, y - 3, area.width, 6);
  context.fillStyle = paper.ink;
  context.fillRect(area.left, y - 1, area.width, 2);
}
