import { usePaper } from '../../theme/index.js';

interface ActuatorBarProps {
  min: number;
  max: number;
  rest: number;
  /** Read back, channel unit; NaN where not known. */
  readBack: number;
  /** Last written, channel unit; NaN where not known. */
  applied: number;
  /** In words, with units. */
  summary: string;
}

const width = 320;
const [left, right] = [8, width - 8];

/** The range of an actuator between its limits, with rest, what was written and what was read back. */
export function ActuatorBar({ min, max, rest, readBack, applied, summary }: ActuatorBarProps) {
  const paper = usePaper();
  const at = (value: number) =>
    left + ((Math.min(max, Math.max(min, value)) - min) / (max - min)) * (right - left);
  const isOutside = readBack < min || readBack > max;
  return (
    <svg
      viewBox={`0 0 ${width} 34`}
      width="100%"
      role="img"
      aria-label={summary}
      style={{ display: 'block' }}
    >
      <path d={`M${left} 5v24M${right} 5v24`} stroke={paper.ink} strokeWidth="2" />
      <path d={`M${left} 17H${right}`} stroke={paper.outline} strokeWidth="1" />
      {Array.from({ length: 9 }, (_, index) => {
        const x = left + ((index + 1) / 10) * (right - left);
        return <path key={index} d={`M${x} 14.5v5`} stroke={paper.outline} strokeWidth="1" />;
      })}
      {Number.isFinite(rest) && (
        <path d={`M${at(rest)} 11v12`} stroke={paper.ink} strokeWidth="1.5" strokeDasharray="2 2" />
      )}
      {Number.isFinite(applied) && (
        <path d={`M${at(applied)} 20l5 9h-10z`} fill={paper.sheet} stroke={paper.ink} strokeWidth="1.5" />
      )}
      {Number.isFinite(readBack) && (
        <path
          d={`M${at(readBack)} 14l5-9h-10z`}
          fill={isOutside ? paper.warn : paper.ink}
          stroke={isOutside ? paper.warn : paper.ink}
        />
      )}
    </svg>
  );
}
