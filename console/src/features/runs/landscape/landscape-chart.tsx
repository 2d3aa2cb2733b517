import Box from '@mui/material/Box';
import { roundScale } from '../../../components/index.js';
import { traceColour, usePaper, type Paper } from '../../../theme/index.js';
import { ChartAxes, type ChartFrame } from './chart-axes.js';
import type { LandscapePoint, PathPoint } from './landscape-points.js';

interface LandscapeChartProps {
  points: readonly LandscapePoint[];
  path: readonly PathPoint[];
  xLabel: string;
  yLabel: string;
  summary: string;
}

const frame: ChartFrame = { width: 520, height: 300, left: 62, right: 12, top: 12, bottom: 40 };
const { width, height } = frame;

/** The surveyed curve, up and down, with the way of the estimate over it and where it is now. */
export function LandscapeChart({ points, path, xLabel, yLabel, summary }: LandscapeChartProps) {
  const paper = usePaper();
  const x = roundScale(
    [...points, ...path].map((point) => point.value),
    6,
  );
  const y = roundScale(
    [...points, ...path].map((point) => point.objective),
    5,
  );
  const px = (value: number) => frame.left + x.at(value) * (width - frame.left - frame.right);
  const py = (value: number) => height - frame.bottom - y.at(value) * (height - frame.top - frame.bottom);
  const line = (list: readonly PathPoint[]) =>
    list.map((point) => `${px(point.value).toFixed(1)},${py(point.objective).toFixed(1)}`).join(' ');
  const last = path.at(-1);
  return (
    <Box
      component="svg"
      viewBox={`0 0 ${width} ${height}`}
      role="img"
      aria-label={summary}
      sx={{ width: '100%', display: 'block', fontSize: 11, fontFamily: 'inherit' }}
    >
      <ChartAxes {...{ x, y, px, py, xLabel, yLabel, paper, frame }} />
      {(['up', 'down'] as const).map((branch) => (
        <polyline
          key={branch}
          points={line(points.filter((point) => point.branch === branch && point.isValid))}
          fill="none"
          stroke={traceColour(paper, branch === 'up' ? 1 : 2)}
          strokeWidth="1.5"
          strokeDasharray={branch === 'down' ? '5 3' : undefined}
        />
      ))}
      {points.map((point, index) => (
        <PointMark key={index} point={point} cx={px(point.value)} cy={py(point.objective)} paper={paper} />
      ))}
      <polyline points={line(path)} fill="none" stroke={paper.ink} strokeWidth="1" opacity="0.75" />
      {last && (
        <path
          d={`M${px(last.value) - 6} ${py(last.objective)}h12M${px(last.value)} ${py(last.objective) - 6}v12`}
          stroke={paper.ink}
          strokeWidth="2.5"
        />
      )}
    </Box>
  );
}

/** Measured points are squares on the way up, crosses on the way down, open where the objective was not valid. */
function PointMark({
  point,
  cx,
  cy,
  paper,
}: {
  point: LandscapePoint;
  cx: number;
  cy: number;
  paper: Paper;
}) {
  const stroke = traceColour(paper, point.branch === 'up' ? 1 : 2);
  if (!point.isValid)
    return <circle cx={cx} cy={cy} r="4" fill="none" stroke={paper.warn} strokeWidth="1.5" />;
  return point.branch === 'up' ? (
    <rect x={cx - 3} y={cy - 3} width="6" height="6" fill={stroke} />
  ) : (
    <path d={`M${cx - 3.5} ${cy - 3.5}l7 7m0 -7l-7 7`} stroke={stroke} strokeWidth="1.5" />
  );
}
