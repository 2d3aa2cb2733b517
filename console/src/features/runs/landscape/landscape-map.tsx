import { useMemo } from 'react';
import Box from '@mui/material/Box';
import { plainNumber, roundScale, roundTicks } from '../../../components/index.js';
import { traceColour, usePaper } from '../../../theme/index.js';
import { ChartAxes, type ChartFrame } from './chart-axes.js';
import { contourSegments, type LandscapeGrid } from './landscape-grid.js';

interface LandscapeMapProps {
  grid: LandscapeGrid | null;
  /** Way of the estimates over the two actuators. */
  path: readonly { x: number; y: number }[];
  xLabel: string;
  yLabel: string;
  /** Name and unit of what is drawn in shades. */
  objectiveLabel: string;
  summary: string;
}

const frame: ChartFrame = { width: 520, height: 380, left: 62, right: 12, top: 12, bottom: 40 };
/** Ink of the best place and of the worst. */
const inkMost = 0.55;
const inkLeast = 0.03;
const levelsWanted = 7;

/** The surveyed objective over two actuators as shades and lines of equal height, and the way of the seek over it. */
export function LandscapeMap({ grid, path, xLabel, yLabel, objectiveLabel, summary }: LandscapeMapProps) {
  const paper = usePaper();
  const x = roundScale([...(grid?.xs ?? []), ...path.map((point) => point.x)], 6);
  const y = roundScale([...(grid?.ys ?? []), ...path.map((point) => point.y)], 6);
  const px = (value: number) => frame.left + x.at(value) * (frame.width - frame.left - frame.right);
  const py = (value: number) =>
    frame.height - frame.bottom - y.at(value) * (frame.height - frame.top - frame.bottom);
  const last = path.at(-1);
  return (
    <>
      <Box
        component="svg"
        viewBox={`0 0 ${frame.width} ${frame.height}`}
        role="img"
        aria-label={summary}
        sx={{ width: '100%', display: 'block', fontSize: 11, fontFamily: 'inherit' }}
      >
        {grid && <Shades grid={grid} px={px} py={py} ink={paper.ink} />}
        <ChartAxes {...{ x, y, px, py, xLabel, yLabel, paper, frame }} />
        {grid && <Contours grid={grid} px={px} py={py} ink={paper.inkSoft} />}
        <polyline
          points={path.map((point) => `${px(point.x).toFixed(1)},${py(point.y).toFixed(1)}`).join(' ')}
          fill="none"
          stroke={traceColour(paper, 2)}
          strokeWidth="2"
        />
        {last && (
          <path
            d={`M${px(last.x) - 7} ${py(last.y)}h14M${px(last.x)} ${py(last.y) - 7}v14`}
            stroke={traceColour(paper, 2)}
            strokeWidth="3"
          />
        )}
      </Box>
      {grid && <ShadeKey grid={grid} label={objectiveLabel} ink={paper.ink} />}
    </>
  );
}

interface LayerProps {
  grid: LandscapeGrid;
  px: (value: number) => number;
  py: (value: number) => number;
  ink: string;
}

const known = ({ objectives }: LandscapeGrid) => objectives.filter((z) => z !== null);

function inkOf(z: number, least: number, greatest: number): number {
  const share = greatest > least ? (z - least) / (greatest - least) : 0.5;
  return inkLeast + share * (inkMost - inkLeast);
}

/** One shade a place, up to half way to the next. */
function Shades({ grid, px, py, ink }: LayerProps) {
  const { xs, ys, objectives } = grid;
  const [least, greatest] = [Math.min(...known(grid)), Math.max(...known(grid))];
  const edges = (values: readonly number[], i: number) => {
    const [here = 0, before, after] = [values[i], values[i - 1], values[i + 1]];
    return [here - (here - (before ?? here)) / 2, here + ((after ?? here) - here) / 2] as const;
  };
  return (
    <g fill={ink}>
      {objectives.map((z, cell) => {
        if (z === null) return null;
        const [x0, x1] = edges(xs, cell % xs.length);
        const [y0, y1] = edges(ys, Math.floor(cell / xs.length));
        return (
          <rect
            key={cell}
            x={px(x0)}
            y={py(y1)}
            width={px(x1) - px(x0)}
            height={py(y0) - py(y1)}
            opacity={inkOf(z, least, greatest)}
          />
        );
      })}
    </g>
  );
}

function Contours({ grid, px, py, ink }: LayerProps) {
  const lines = useMemo(
    () =>
      roundTicks(Math.min(...known(grid)), Math.max(...known(grid)), levelsWanted).map((level) => ({
        level,
        segments: contourSegments(grid, level),
      })),
    [grid],
  );
  return (
    <g stroke={ink} strokeWidth="0.8" fill="none">
      {lines.map(({ level, segments }) => (
        <path
          key={level}
          d={segments
            .map(({ from, to }) => `M${px(from[0])} ${py(from[1])}L${px(to[0])} ${py(to[1])}`)
            .join('')}
        />
      ))}
    </g>
  );
}

function ShadeKey({ grid, label, ink }: { grid: LandscapeGrid; label: string; ink: string }) {
  const values = known(grid);
  return (
    <Box
      sx={{
        display: 'flex',
        flexWrap: 'wrap',
        alignItems: 'center',
        gap: 1,
        fontSize: '0.75rem',
        color: 'text.secondary',
      }}
    >
      <span>{label}:</span>
      <span>{plainNumber(Math.min(...values))}</span>
      <Box
        aria-hidden
        sx={{
          width: '6rem',
          height: '0.75rem',
          background: `linear-gradient(to right, color-mix(in srgb, ${ink} ${inkLeast * 100}%, transparent), color-mix(in srgb, ${ink} ${inkMost * 100}%, transparent))`,
        }}
      />
      <span>{plainNumber(Math.max(...values))}</span>
    </Box>
  );
}
