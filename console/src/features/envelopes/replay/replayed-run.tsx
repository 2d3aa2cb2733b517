import { useState } from 'react';
import { Link as RouterLink } from 'react-router-dom';
import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import Link from '@mui/material/Link';
import type { Rig } from '@cresthold/shared';
import type { EnvelopeReplay } from '../../../api/index.js';
import { formatMoment, Notice, plainNumber } from '../../../components/index.js';
import { ResponsiveTable } from '../form/responsive-table.js';
import { replayFindings } from './replay-findings.js';

type Run = EnvelopeReplay['runs'][number];

const hintTitles = {
  nuisance: 'Nuisance trip',
  missing: 'Missing trip',
  late: 'Later trip',
} as const;

/** What a version would have done in one run. */
export function ReplayedRun({ run, rig }: { run: Run; rig: Rig }) {
  const { runId, title, startedAt, status, envelopeVersion, report, note } = run;
  return (
    <Box
      component="article"
      aria-label={`${title}, ${formatMoment(startedAt)}`}
      sx={{ display: 'grid', gap: 1 }}
    >
      <Box sx={{ borderTop: 1, borderColor: 'text.primary', pt: 0.5 }}>
        <Link component={RouterLink} to={`/runs/${runId}`}>
          <strong>{title}</strong>
        </Link>{' '}
        <Box component="span" sx={{ fontSize: '0.75rem', color: 'text.secondary' }}>
          {formatMoment(startedAt)}, {status}, under version {envelopeVersion}
          {report && `, ${report.scans} scans`}
        </Box>
      </Box>
      {note !== null && <Notice kind="warn" title={note} />}
      {report?.hints.map(({ kind, text }) => (
        <Notice key={kind} kind="warn" title={hintTitles[kind]}>
          {text}
        </Notice>
      ))}
      {report && (
        <Box>
          {report.firstHalt === null ? (
            'It would not have ended the run.'
          ) : (
            <>
              First to end motion: <strong>{report.firstHalt.cause}</strong> ({report.firstHalt.action}) at{' '}
              <AtTime runId={runId} tS={report.firstHalt.tS} />. What follows it would not have come to pass.
            </>
          )}
        </Box>
      )}
      {report && <Findings runId={runId} findings={replayFindings(report, rig)} />}
    </Box>
  );
}

function Findings({ runId, findings }: { runId: string; findings: ReturnType<typeof replayFindings> }) {
  const [isAll, setAll] = useState(false);
  const notable = findings.filter(({ isNotable }) => isNotable);
  const shown = isAll ? findings : notable;
  return (
    <>
      {shown.length > 0 && (
        <ResponsiveTable
          label="Findings"
          minWidthPx={560}
          heads={['What', 'Would have', 'Least margin', 'When']}
          rows={shown.map(({ what, text, margin, atTS }) => [
            what,
            text,
            margin ?? '—',
            atTS === null ? '—' : <AtTime key="at" runId={runId} tS={atTS} />,
          ])}
        />
      )}
      <Box>
        <Button size="small" aria-pressed={isAll} onClick={() => setAll(!isAll)}>
          {isAll ? 'Only what would have acted' : `All ${findings.length} with their margins`}
        </Button>
      </Box>
    </>
  );
}

function AtTime({ runId, tS }: { runId: string; tS: number }) {
  return (
    <Link component={RouterLink} to={`/runs/${runId}?atS=${tS}`}>
      {plainNumber(tS)} s
    </Link>
  );
}
