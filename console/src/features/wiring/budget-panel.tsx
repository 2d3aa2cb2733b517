import Box from '@mui/material/Box';
import type { RigStatus } from '@cresthold/shared';
import type { ScanBudget } from '../../api/index.js';
import { formatNumber, Loading, Notice, Panel, ProblemNotice } from '../../components/index.js';

/** Share of the period above which the wire leaves too little room for retries and writes. */
const warnShare = 0.8;

interface BudgetPanelProps {
  budget: ScanBudget | undefined;
  error: unknown;
  /** A newer answer is on its way. */
  isStale: boolean;
  status: RigStatus | null;
}

/** What one scan will cost on the wires, before anything is saved. */
export function BudgetPanel({ budget, error, isStale, status }: BudgetPanelProps) {
  return (
    <Panel title="Scan budget">
      {error !== null && error !== undefined && (
        <ProblemNotice title="The budget is not known" error={error} />
      )}
      {!budget && !error && <Loading what="scan budget" />}
      {budget && (
        <Box sx={{ display: 'grid', gap: 1.5, opacity: isStale ? 0.7 : 1 }}>
          <Total budget={budget} />
          <Box
            component="ul"
            sx={{ m: 0, p: 0, listStyle: 'none', display: 'grid', gap: 0.5, fontSize: '0.8125rem' }}
          >
            {budget.connections.map((connection, index) => (
              <li key={index}>
                <strong>{connection.id || `connection ${index + 1}`}</strong>: {connectionText(connection)}
              </li>
            ))}
          </Box>
          <Box sx={{ fontSize: '0.75rem', color: 'text.secondary' }}>
            For devices that answer at once; connections are read side by side, so the slowest counts. Writes
            of moving actuators come on top.
            {status !== null &&
              status.connections.every(({ isConnected }) => isConnected) &&
              status.scan.count > 0 &&
              ` As saved and measured: ${formatNumber(status.scan.wireMeanMs, 1)} ms on the wires of a scan.`}
          </Box>
        </Box>
      )}
    </Panel>
  );
}

function Total({ budget }: { budget: ScanBudget }) {
  const { requests, wireS, periodMs, shareOfPeriod } = budget;
  if (requests === 0) return <div role="status">Nothing is read yet.</div>;
  const head = requests === 1 ? 'One request a scan' : `${requests} requests a scan`;
  if (wireS === null) return <div role="status">{head}; these wires set no bound on their time.</div>;
  if (periodMs === null || shareOfPeriod === null) {
    return <div role="status">{`${head}, ${formatNumber(1000 * wireS, 1)} ms on the wire.`}</div>;
  }
  const text = `${head}, ${formatNumber(1000 * wireS, 1)} ms on the wire of ${periodMs} ms: ${percent(shareOfPeriod)}`;
  return (
    <>
      {shareOfPeriod > warnShare ? (
        <Notice kind="warn" role="status" title={text}>
          {shareOfPeriod > 1
            ? 'More than the period: scans will be late. Use a longer period, fewer channels, neighbouring addresses or a faster line.'
            : 'Little room for retries and writes: use a longer period, fewer channels, neighbouring addresses or a faster line.'}
        </Notice>
      ) : (
        <div role="status">{text}</div>
      )}
      <ShareBar share={shareOfPeriod} />
    </>
  );
}

function ShareBar({ share }: { share: number }) {
  return (
    <Box
      aria-hidden="true"
      sx={{ border: 1, borderColor: 'paper.outline', height: 12, position: 'relative' }}
    >
      <Box
        sx={{
          height: '100%',
          width: `${100 * Math.min(1, share)}%`,
          bgcolor: share > warnShare ? 'paper.warn' : 'text.primary',
        }}
      />
      <Box
        sx={{
          position: 'absolute',
          left: `${100 * warnShare}%`,
          top: -3,
          bottom: -3,
          borderLeft: '1px dashed',
          borderColor: 'paper.outline',
        }}
      />
    </Box>
  );
}

function percent(share: number): string {
  return `${formatNumber(100 * share, share < 0.1 ? 1 : 0)} % of the period`;
}

function connectionText({
  channels,
  leftOut,
  requests,
  wireS,
  note,
}: ScanBudget['connections'][number]): string {
  const without = leftOut > 0 ? `, ${leftOut} left out until their address is mended` : '';
  if (requests === null) return `${note ?? 'not known'}${without}`;
  const time = wireS === null ? 'no bound by the wire' : `${formatNumber(1000 * wireS, 1)} ms`;
  const asked = requests === 1 ? 'one request' : `${requests} requests`;
  return `${channels === 1 ? 'one channel' : `${channels} channels`} by ${asked}, ${time}${without}`;
}
