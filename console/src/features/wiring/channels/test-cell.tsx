import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import type { ChannelProbe } from '@cresthold/shared';
import { plainNumber } from '../../../components/index.js';
import type { TestState } from './live-test.js';

interface TestCellProps {
  id: string;
  title: string;
  unit: string;
  state: TestState | undefined;
  /** Why it cannot be tested, in words; null where it can. */
  obstacle: string | null;
  onTest: (channels: readonly string[]) => void;
}

/** The live test of a channel: the button, and what came. */
export function TestCell({ id, title, unit, state, obstacle, onTest }: TestCellProps) {
  return (
    <td className="cell-wide">
      <Box sx={{ display: 'flex', gap: 1, alignItems: 'flex-start', minWidth: { md: 260 } }}>
        <Button
          aria-label={`Test ${title}`}
          disabled={obstacle !== null || state?.is === 'asked'}
          onClick={() => onTest([id])}
        >
          Test
        </Button>
        <Box
          role="status"
          sx={{ fontSize: '0.75rem', lineHeight: 1.4, minWidth: 0, overflowWrap: 'anywhere' }}
        >
          {obstacle !== null && <span>{obstacle}</span>}
          {obstacle === null && state && <TestResult state={state} unit={unit} />}
        </Box>
      </Box>
    </td>
  );
}

function TestResult({ state, unit }: { state: TestState; unit: string }) {
  if (state.is === 'asked') return <span>asking …</span>;
  if (state.is === 'failed') return <Warning>{state.message}</Warning>;
  const { probe } = state;
  return (
    <>
      <div>
        <strong>{valueText(probe, unit)}</strong> · {qualityText(probe)}
      </div>
      {probe.raw !== null && <div>raw {probe.raw}</div>}
      {probe.calibration !== null && <div>{calibrationText(probe)}</div>}
      {probe.trace !== null && <div>{traceText(probe.trace)}</div>}
      {probe.fault !== null && <Warning>{probe.fault.message}</Warning>}
      {probe.note !== null && <Box sx={{ color: 'text.secondary' }}>{probe.note}</Box>}
    </>
  );
}

function Warning({ children }: { children: string }) {
  return <Box sx={{ color: 'paper.warn' }}>✕ {children}</Box>;
}

function valueText({ value, calibrated, calibration, trace }: ChannelProbe, unit: string): string {
  if (trace !== null) return `${trace.count} points`;
  const shown = calibration === null ? value : calibrated;
  return shown === null ? 'no value' : `${plainNumber(shown)} ${unit}`.trim();
}

function qualityText({ quality, ageS }: ChannelProbe): string {
  if (ageS === null) return quality;
  return ageS === 0
    ? `${quality}, just now`
    : `${quality}, ${ageS < 10 ? ageS.toFixed(1) : Math.round(ageS)} s old`;
}

function calibrationText({ value, calibrated, calibration }: ChannelProbe): string {
  const given = value === null ? 'nothing' : plainNumber(value);
  const made =
    calibrated === null ? 'no value: outside what the calibration covers' : plainNumber(calibrated);
  return `by calibration version ${calibration?.version}: ${given} makes ${made}`;
}

function traceText({ count, points }: NonNullable<ChannelProbe['trace']>): string {
  const shown = points.slice(0, 6).map((point) => plainNumber(point));
  return `begins ${shown.join(', ')}${count > shown.length ? ' …' : ''}`;
}
