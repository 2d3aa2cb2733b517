import { Link as RouterLink } from 'react-router-dom';
import Box from '@mui/material/Box';
import Link from '@mui/material/Link';
import type { EnvelopeDocument } from '../../api/index.js';
import { formatMoment, Panel } from '../../components/index.js';
import { stageTexts } from './envelope-choice.js';

interface EnvelopeVersionsProps {
  envelopes: readonly EnvelopeDocument[];
  shown: number | undefined;
}

/** Every version with its stage, who wrote and who decided, and why. */
export function EnvelopeVersions({ envelopes, shown }: EnvelopeVersionsProps) {
  return (
    <Panel title="History" isFlush>
      <Box component="ol" reversed sx={{ m: 0, p: 0, listStyle: 'none' }}>
        {envelopes.map((envelope) => (
          <Box
            component="li"
            key={envelope.id}
            sx={{
              px: 1.5,
              py: 1,
              '& + &': { borderTop: 1, borderColor: 'divider' },
              bgcolor: envelope.version === shown ? 'paper.shade' : undefined,
            }}
          >
            <Box sx={{ display: 'flex', flexWrap: 'wrap', columnGap: 2, justifyContent: 'space-between' }}>
              <Link
                component={RouterLink}
                to={`?version=${envelope.version}`}
                aria-current={envelope.version === shown ? 'true' : undefined}
              >
                Version {envelope.version}
              </Link>
              <Box
                component="span"
                sx={{
                  fontWeight: envelope.status === 'in-force' ? 700 : 400,
                  color: envelope.status === 'submitted' ? 'paper.act' : undefined,
                }}
              >
                {stageTexts[envelope.status]}
              </Box>
            </Box>
            <Provenance envelope={envelope} />
          </Box>
        ))}
      </Box>
    </Panel>
  );
}

function Provenance({ envelope }: { envelope: EnvelopeDocument }) {
  const { author, createdAt, decidedBy, decidedAt, reason } = envelope;
  return (
    <Box sx={{ fontSize: '0.75rem', color: 'text.secondary' }}>
      <div>
        by {author}, {formatMoment(createdAt)}
      </div>
      {decidedBy !== null && (
        <div>
          decided by {decidedBy}
          {decidedAt !== null && `, ${formatMoment(decidedAt)}`}
        </div>
      )}
      {reason !== null && reason !== '' && <div>“{reason}”</div>}
    </Box>
  );
}
