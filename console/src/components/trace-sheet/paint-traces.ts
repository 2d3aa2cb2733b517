import { fontFamily, traceColour, type Paper } from '../../theme/index.js';
import { roundTicks } from '../chart-scale.js';
import { plainNumber } from '../format-quantity.js';
import { placeAt, type PlacedTrace } from './placed-trace.js';
import type { TraceBand } from './trace-band.js';

export interface TraceDrawing {
  newest: PlacedTrace | null;
  /** Earlier ones, the oldest first. */
  history: readonly PlacedTrace[];
  band: TraceBand | null;
  /** Ends of the axis, in its unit. */
  from: number;
  to: number;
  /** Ends of the values. */
  min: number;
  max: number;
  xTitle: string;
}

/** Where the drawing lies in its frame, px. */
export const traceFrame = { left: 58, right: 10, top: 8, bottom: 38 };

const font = `11px ${fontFamily}`;

interface Scales {
  /** Place of a share of the axis, px. */
  x: (share: number) => number;
  y: (value: number) => number;
}

/** Draws traces over their axis as on a sheet of recorder paper. */
export function paintTraces(
  context: CanvasRenderingContext2D,
  drawing: TraceDrawing,
  size: { width: number; height: number },
  paper: Paper,
): void {
  const { left, right, top, bottom } = traceFrame;
  const { min, max } = drawing;
  const scales: Scales = {
    x: (share) => left + share * (size.width - left - right),
    y: (value) => size.height - bottom - ((value - min) / (max - min)) * (size.height - top - bottom),
  };
  context.clearRect(0, 0, size.width, size.height);
  paintGrid(context, drawing, scales, size, paper);
  context.save();
  context.beginPath();
  context.rect(left, top, size.width - left - right, size.height - top - bottom);
  context.clip();
  if (drawing.band) paintBand(context, drawing.band, scales, paper);
  drawing.history.forEach((trace, index) => {
    const age = (index + 1) / (drawing.history.length + 1);
    paintLine(context, trace, scales, { colour: paper.inkSoft, width: 1, opacity: 0.08 + 0.3 * age });
  });
  if (drawing.newest) {
    paintLine(context, drawing.newest, scales, { colour: traceColour(paper, 0), width: 1.5, opacity: 1 });
  }
  context.restore();
}

function paintGrid(
  context: CanvasRenderingContext2D,
  { from, to, min, max, xTitle }: TraceDrawing,
  { x, y }: Scales,
  { width, height }: { width: number; height: number },
  paper: Paper,
): void {
  const { left, right, top, bottom } = traceFrame;
  context.font = font;
  context.fillStyle = paper.inkSoft;
  context.strokeStyle = paper.grid;
  context.lineWidth = 1;
  context.textAlign = 'center';
  const wanted = Math.max(2, Math.floor((width - left - right) / 90));
  for (const tick of to > from ? roundTicks(from, to, wanted) : [from]) {
    const at = x(to > from ? (tick - from) / (to - from) : 0);
    line(context, at, top, at, height - bottom);
    context.fillText(plainNumber(tick), Math.min(at, width - 16), height - bottom + 14);
  }
  context.fillText(xTitle, (left + width - right) / 2, height - 6);
  context.textAlign = 'right';
  for (const tick of roundTicks(min, max, Math.max(2, Math.floor((height - top - bottom) / 32)))) {
    line(context, left, y(tick), width - right, y(tick));
    context.fillText(plainNumber(tick), left - 6, y(tick) + 4);
  }
}

function line(context: CanvasRenderingContext2D, x0: number, y0: number, x1: number, y1: number): void {
  context.beginPath();
  context.moveTo(x0, y0);
  context.lineTo(x1, y1);
  context.stroke();
}

function paintBand(
  context: CanvasRenderingContext2D,
  { low, high }: TraceBand,
  { x, y }: Scales,
  paper: Paper,
): void {
  context.fillStyle = paper.inkSoft;
  context.globalAlpha = 0.14;
  const width = x(1 / low.length) - x(0);
  for (let i = 0; i < low.length; i += 1) {
    if (Number.isNaN(low[i])) continue;
    const top = y(high[i]!);
    context.fillRect(x(i / low.length), top, width, Math.max(1, y(low[i]!) - top));
  }
  context.globalAlpha = 1;
}

interface Pen {
  colour: string;
  width: number;
  opacity: number;
}

function paintLine(context: CanvasRenderingContext2D, trace: PlacedTrace, { x, y }: Scales, pen: Pen): void {
  const { points, count } = trace;
  context.strokeStyle = pen.colour;
  context.lineWidth = pen.width;
  context.globalAlpha = pen.opacity;
  context.beginPath();
  for (let i = 0; i < points.length; i += 1) {
    context.lineTo(x(placeAt(trace, i) / Math.max(1, count - 1)), y(points[i]!));
  }
  context.stroke();
  context.globalAlpha = 1;
}
