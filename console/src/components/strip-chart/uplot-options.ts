import type uPlot from 'uplot';
import { fontFamily, traceColour, type Paper } from '../../theme/index.js';
import { formatNumber, plainNumber } from '../format-quantity.js';
import type { ChartLevel, ChartRange, ChartTrace } from './chart-trace.js';

export interface ChartLook {
  traces: readonly ChartTrace[];
  levels: readonly ChartLevel[];
  /** Range of the value axis; null fits it to what is drawn. */
  range: ChartRange | null;
  /** Clock time, or seconds from a start. */
  xAxis: 'clock' | 'seconds';
  paper: Paper;
}

const font = `11px ${fontFamily}`;

/** Options of a chart that looks like a sheet of recorder paper. */
export function uplotOptions(look: ChartLook, width: number, height: number): uPlot.Options {
  const { paper, traces } = look;
  const axis = {
    stroke: paper.inkSoft,
    font,
    grid: { stroke: paper.grid, width: 1 },
    ticks: { show: false },
  };
  return {
    width,
    height,
    legend: { show: false },
    cursor: { show: false },
    padding: [8, 10, 0, 0],
    scales: {
      x: { time: look.xAxis === 'clock', auto: false },
      y: { range: (_chart, least, greatest) => valueRange(look.range, least, greatest) },
    },
    axes: [
      { ...axis, size: 24, gap: 4, space: 70, ...(look.xAxis === 'clock' ? { values: clockTimes } : {}) },
      { ...axis, size: 58, gap: 6, space: 26, values: (_chart, values) => values.map(plainNumber) },
    ],
    series: [{}, ...traces.map((trace) => seriesOf(trace, paper))],
    hooks: { drawAxes: [(chart) => drawLevels(chart, look.levels, paper)] },
  };
}

function seriesOf(trace: ChartTrace, paper: Paper): uPlot.Series {
  return {
    label: trace.label,
    stroke: traceColour(paper, trace.colour),
    width: 1.5,
    points: { show: false },
    ...(trace.isDashed ? { dash: [5, 3] } : {}),
    value: (_chart, value) => formatNumber(value, trace.decimals),
  };
}

/** The given range, widened where the values leave it; or one that fits with a little air. */
function valueRange(
  range: ChartRange | null,
  least: number | null,
  greatest: number | null,
): [number, number] {
  if (least === null || greatest === null || !Number.isFinite(least))
    return range ? [range.min, range.max] : [0, 1];
  if (range) return [Math.min(range.min, least), Math.max(range.max, greatest)];
  const air = (greatest - least) * 0.1 || Math.abs(greatest) * 0.05 || 1;
  return [least - air, greatest + air];
}

/** Room that half of a clock time takes, px: nearer to the right edge it would be cut off. */
const halfClockPx = 26;

function clockTimes(chart: uPlot, timesS: number[]): string[] {
  const end = chart.bbox.width / devicePixelRatio - halfClockPx;
  return timesS.map((timeS) =>
    chart.valToPos(timeS, 'x') > end ? '' : new Date(timeS * 1000).toLocaleTimeString('en-GB'),
  );
}

function drawLevels(chart: uPlot, levels: readonly ChartLevel[], paper: Paper): void {
  const { ctx, bbox } = chart;
  const ratio = bbox.width / (chart.over.clientWidth || bbox.width);
  ctx.save();
  ctx.strokeStyle = paper.inkSoft;
  ctx.fillStyle = paper.inkSoft;
  ctx.lineWidth = ratio;
  ctx.setLineDash([8 * ratio, 3 * ratio, 2 * ratio, 3 * ratio]);
  ctx.font = `${10 * ratio}px ${fontFamily}`;
  ctx.textAlign = 'right';
  ctx.textBaseline = 'alphabetic';
  for (const level of levels) {
    const y = chart.valToPos(level.value, 'y', true);
    if (y < bbox.top || y > bbox.top + bbox.height) continue;
    ctx.beginPath();
    ctx.moveTo(bbox.left, y);
    ctx.lineTo(bbox.left + bbox.width, y);
    ctx.stroke();
    const isNearTop = y - bbox.top < 14 * ratio;
    ctx.fillText(level.label, bbox.left + bbox.width - 4 * ratio, isNearTop ? y + 11 * ratio : y - 3 * ratio);
  }
  ctx.restore();
}
