import Box from '@mui/material/Box';
import type { StopTrajectory, TimeToRest } from '@cresthold/shared';
import { plainNumber } from '../../components/index.js';
import { usePaper } from '../../theme/index.js';

const [width, height, edge] = [320, 64, 6];

/** How each actuator came to rest after a trip: read back as a line, what was written dashed. */
export function StopTrajectoryChart({ trajectory }: { trajectory: StopTrajectory }) {
  return (
    <Box
      sx={{ display: 'grid', gap: 1, gridTemplateColumns: 'repeat(auto-fit, minmax(min(16rem, 100%), 1fr))' }}
    >
      {trajectory.timesToRest.map((time) => (
        <ActuatorWay key={time.channel} time={time} trajectory={trajectory} />
      ))}
    </Box>
  );
}

/** @example restText({ channel: 'valve', timeS: 2.345 }) // 'valve: at rest after 2.35 s' */
export function restText({ channel, timeS }: TimeToRest): string {
  if (timeS === null) return `${channel}: not seen at rest`;
  return `${channel}: at rest after ${plainNumber(Math.round(timeS * 100) / 100)} s`;
}

function ActuatorWay({ time, trajectory }: { time: TimeToRest; trajectory: StopTrajectory }) {
  const paper = usePaper();
  const readBack = seriesOf(trajectory, time.channel);
  const applied = seriesOf(trajectory, `${time.channel}.applied`);
  const scale = scaleOf([...readBack, ...applied], trajectory);
  const text = restText(time);
  return (
    <Box component="figure" sx={{ m: 0 }}>
      <Box component="figcaption" sx={{ fontSize: '0.75rem' }}>
        {text}
      </Box>
      <svg viewBox={`0 0 ${width} ${height}`} width="100%" role="img" aria-label={text}>
        <path d={`M${scale.x(0)} 0V${height}`} stroke={paper.trip} strokeWidth="1" />
        {time.timeS !== null && (
          <path d={`M${scale.x(time.timeS)} 0V${height}`} stroke={paper.outline} strokeDasharray="2 2" />
        )}
        <path d={pathOf(applied, scale)} fill="none" stroke={paper.ink} strokeDasharray="4 3" />
        <path d={pathOf(readBack, scale)} fill="none" stroke={paper.ink} strokeWidth="1.5" />
      </svg>
    </Box>
  );
}

type Point = [tS: number, value: number];

interface Scale {
  x: (tS: number) => number;
  y: (value: number) => number;
}

function seriesOf({ columns, rows }: StopTrajectory, column: string): Point[] {
  const index = columns.indexOf(column);
  return rows.flatMap(({ tS, values }): Point[] => {
    const value = values[index];
    return value === null || value === undefined ? [] : [[tS, value]];
  });
}

function scaleOf(points: Point[], { rows }: StopTrajectory): Scale {
  const [from, to] = [Math.min(0, rows[0]?.tS ?? 0), Math.max(0.1, rows.at(-1)?.tS ?? 1)];
  const values = points.map(([, value]) => value);
  const [low, high] = [Math.min(...values), Math.max(...values)];
  const span = high - low || 1;
  return {
    x: (tS) => edge + ((tS - from) / (to - from)) * (width - 2 * edge),
    y: (value) => height - edge - ((value - low) / span) * (height - 2 * edge),
  };
}

function pathOf(points: Point[], { x, y }: Scale): string {
  return points
    .map(([tS, value], i) => `${i === 0 ? 'M' : 'L'}${x(tS).toFixed(1)} ${y(value).toFixed(1)}`)
    .join('');
}
