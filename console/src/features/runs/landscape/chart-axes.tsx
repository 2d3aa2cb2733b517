import { plainNumber, type Scale } from '../../../components/index.js';
import type { Paper } from '../../../theme/index.js';

/** Size of a drawing, and what it leaves free around its curves. */
export interface ChartFrame {
  width: number;
  height: number;
  left: number;
  right: number;
  top: number;
  bottom: number;
}

interface ChartAxesProps {
  x: Scale;
  y: Scale;
  px: (value: number) => number;
  py: (value: number) => number;
  xLabel: string;
  yLabel: string;
  paper: Paper;
  frame: ChartFrame;
}

/** Ticks, grid and labels of a chart with two scales. */
export function ChartAxes({ x, y, px, py, xLabel, yLabel, paper, frame }: ChartAxesProps) {
  const { width, height } = frame;
  const bottom = height - frame.bottom;
  return (
    <g fill={paper.inkSoft}>
      {x.ticks.map((tick) => (
        <g key={tick}>
          <path d={`M${px(tick)} ${frame.top}V${bottom}`} stroke={paper.grid} />
          <text x={px(tick)} y={bottom + 14} textAnchor="middle">
            {plainNumber(tick)}
          </text>
        </g>
      ))}
      {y.ticks.map((tick) => (
        <g key={tick}>
          <path d={`M${frame.left} ${py(tick)}H${width - frame.right}`} stroke={paper.grid} />
          <text x={frame.left - 6} y={py(tick) + 4} textAnchor="end">
            {plainNumber(tick)}
          </text>
        </g>
      ))}
      <path
        d={`M${frame.left} ${frame.top}V${bottom}H${width - frame.right}`}
        stroke={paper.outline}
        fill="none"
      />
      <text x={(frame.left + width - frame.right) / 2} y={height - 6} textAnchor="middle">
        {xLabel}
      </text>
      <text transform={`translate(12 ${(frame.top + bottom) / 2}) rotate(-90)`} textAnchor="middle">
        {yLabel}
      </text>
    </g>
  );
}
