import { Link as RouterLink, useParams, useSearchParams } from 'react-router-dom';
import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import GlobalStyles from '@mui/material/GlobalStyles';
import Link from '@mui/material/Link';
import type { Rig } from '@cresthold/shared';
import type { EnvelopeDocument } from '../../../api/index.js';
import { Empty, formatMoment, Loading, Page, ProblemNotice } from '../../../components/index.js';
import { useSession } from '../../auth/index.js';
import { useRig, useShowsRig } from '../../rigs/index.js';
import { useEnvelopes } from '../api/envelope-queries.js';
import { chosenEnvelope, stageTexts } from '../envelope-choice.js';
import { causeEffectTable } from './cause-effect-table.js';

/** On paper the sheet stands alone: one landscape page for a rig. */
const printStyles = {
  '@page': { size: 'A4 landscape', margin: '10mm' },
  '@media print': {
    'body *': { visibility: 'hidden' },
    '#cause-effect, #cause-effect *': { visibility: 'visible' },
    '#cause-effect': {
      position: 'absolute',
      inset: 0,
      color: 'black',
      background: 'white',
      fontSize: '7.5pt',
    },
    '#cause-effect table': { pageBreakInside: 'avoid' },
  },
} as const;

const cells = {
  borderCollapse: 'collapse',
  width: '100%',
  fontSize: '0.75rem',
  '& th, & td': { border: 1, borderColor: 'divider', p: '3px 6px', textAlign: 'left', verticalAlign: 'top' },
} as const;

/** What each cause does to each actuator, to be read, printed and signed. */
export function CauseEffectPage() {
  const { rigId = '' } = useParams();
  const [search] = useSearchParams();
  const { account } = useSession();
  useShowsRig(rigId);
  const rig = useRig(rigId);
  const envelopes = useEnvelopes(rigId);
  const asked = search.get('version');
  const envelope = chosenEnvelope(envelopes.data ?? [], asked === null ? null : Number(asked), account);
  const error = rig.error ?? envelopes.error;
  return (
    <Page
      title="Cause and effect"
      trail={
        <Link
          component={RouterLink}
          to={`/rigs/${rigId}/envelope${asked === null ? '' : `?version=${asked}`}`}
        >
          Envelope of {rig.data?.content.title ?? rigId}
        </Link>
      }
      actions={
        <Button variant="contained" onClick={() => globalThis.print()}>
          Print
        </Button>
      }
    >
      <GlobalStyles styles={printStyles} />
      {(rig.isPending || envelopes.isPending) && <Loading what="envelope" />}
      {error !== null && <ProblemNotice title="The envelope could not be loaded" error={error} />}
      {envelopes.data?.length === 0 && <Empty title="This rig has no envelope yet." />}
      {rig.data && envelope && <CauseEffectSheet rig={rig.data.content} envelope={envelope} />}
    </Page>
  );
}

function CauseEffectSheet({ rig, envelope }: { rig: Rig; envelope: EnvelopeDocument }) {
  const { actuators, rows } = causeEffectTable(envelope.content, rig);
  const { version, status, decidedBy, decidedAt } = envelope;
  return (
    <Box id="cause-effect" sx={{ display: 'grid', gap: 1, minWidth: 0 }}>
      <Box>
        <strong>{rig.title}</strong>, envelope version {version}, {stageTexts[status]}
        {decidedBy !== null && decidedAt !== null && ` (decided by ${decidedBy}, ${formatMoment(decidedAt)})`}
      </Box>
      <Box sx={{ overflowX: 'auto' }} tabIndex={0} role="region" aria-label="Cause and effect, table">
        <Box component="table" aria-label="Cause and effect" sx={cells}>
          <thead>
            <tr>
              {['Cause', 'When', 'Action', 'Latches', ...actuators.map(({ title }) => title)].map((head) => (
                <th key={head} scope="col">
                  {head}
                </th>
              ))}
            </tr>
          </thead>
          <tbody>
            {rows.map((row, index) => (
              <tr key={index}>
                <th scope="row">
                  {row.cause} <span style={{ fontWeight: 400 }}>({row.kind})</span>
                </th>
                <td>{row.when}</td>
                <td>
                  <strong>{row.action}</strong>
                </td>
                <td>{row.latches}</td>
                {row.effects.map((effect, column) => (
                  <td key={actuators[column]?.id}>{effect}</td>
                ))}
              </tr>
            ))}
          </tbody>
        </Box>
      </Box>
      <Box sx={{ fontSize: '0.75rem' }}>
        Stop categories as in IEC 60204-1. These are stops by software on a general-purpose computer and no
        safety function: the rig needs its own hard-wired emergency stop and protection.
      </Box>
      <Box sx={{ fontSize: '0.75rem', mt: 2 }}>Checked by ______________________ on ____________</Box>
    </Box>
  );
}
