import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import type { SignedInPlace } from '../../api/index.js';
import { formatMoment } from '../../components/index.js';

interface SessionListProps {
  sessions: readonly SignedInPlace[];
  isBusy: boolean;
  onEnd: (sessionId: string) => void;
}

/** Where somebody is signed in, each with the way to end it. */
export function SessionList({ sessions, isBusy, onEnd }: SessionListProps) {
  return (
    <Box component="ul" sx={{ m: 0, p: 0, listStyle: 'none' }}>
      {sessions.map((session) => (
        <Box
          component="li"
          key={session.id}
          sx={{
            display: 'flex',
            flexWrap: 'wrap',
            gap: 1,
            alignItems: 'center',
            px: 1.5,
            py: 1,
            '& + &': { borderTop: 1, borderColor: 'divider' },
          }}
        >
          <Box sx={{ flex: '1 1 16rem', minWidth: 0, overflowWrap: 'anywhere' }}>
            <strong>{browserOf(session.userAgent)}</strong> from {session.address}
            {session.isThis && <strong> · this one</strong>}
            <Box sx={{ fontSize: '0.8125rem', color: 'text.secondary' }} title={session.userAgent}>
              since {formatMoment(session.beganAt)}, last act {formatMoment(session.lastSeenAt)}
            </Box>
          </Box>
          {!session.isThis && (
            <Button
              disabled={isBusy}
              onClick={() => onEnd(session.id)}
              aria-label={`End the session since ${formatMoment(session.beganAt)}`}
            >
              End
            </Button>
          )}
        </Box>
      ))}
    </Box>
  );
}

const commonNames = new Set(['Mozilla', 'AppleWebKit', 'Gecko', 'Version', 'Mobile', 'Safari']);

/** A short name for what a browser or script calls itself; the whole text stands in the title. */
function browserOf(userAgent: string): string {
  if (userAgent === '') return 'Unnamed program';
  const system = /\(([^;)]+)/.exec(userAgent)?.[1];
  const named = [...userAgent.matchAll(/([A-Za-z]+)\/[\d.]/g)].map(([, name = '']) => name);
  // Nearly every browser names these beside itself.
  const name = named.filter((one) => !commonNames.has(one)).at(-1) ?? named.at(-1) ?? userAgent;
  return system === undefined ? name : `${name} (${system})`;
}
