import Box from '@mui/material/Box';
import type { EnvelopeContent, InterlockBypass, RigStatus } from '@cresthold/shared';
import { formatClock, GatedButton, Notice, ProblemNotice } from '../../components/index.js';
import { useObstacle } from '../auth/index.js';
import { useEndBypass } from './api/interlock-commands.js';
import { leftText } from './left-text.js';
import { useNowMs } from './use-now.js';

interface BypassBannerProps {
  status: RigStatus | null;
  envelope: EnvelopeContent | undefined;
  /** Only shown, as on the floor. */
  isReadOnly?: boolean;
}

/** Every bypass that is going on: which interlock does not act, who said so, why and for how long still. */
export function BypassBanner({ status, envelope, isReadOnly = false }: BypassBannerProps) {
  const bypassed = status?.interlocks.filter(({ isBypassed }) => isBypassed) ?? [];
  if (!status || bypassed.length === 0) return null;
  return (
    <Box sx={{ display: 'grid', gap: 1 }}>
      {bypassed.map(({ id, bypass }) => (
        <BypassNotice
          key={id}
          rigId={status.rigId}
          interlock={id}
          title={envelope?.interlocks.find((interlock) => interlock.id === id)?.title ?? id}
          bypass={bypass}
          isReadOnly={isReadOnly}
        />
      ))}
    </Box>
  );
}

interface BypassNoticeProps {
  rigId: string;
  interlock: string;
  title: string;
  bypass: InterlockBypass | null;
  isReadOnly: boolean;
}

function BypassNotice({ rigId, interlock, title, bypass, isReadOnly }: BypassNoticeProps) {
  const nowMs = useNowMs();
  const obstacle = useObstacle('interlock.acknowledge');
  const end = useEndBypass(rigId);
  return (
    <Notice
      kind="warn"
      title={`Bypassed: ${title} does not act${bypass ? `, ${leftText(bypass.untilAt, nowMs)}` : ''}`}
      actions={
        isReadOnly ? undefined : (
          <GatedButton obstacle={obstacle} isBusy={end.isPending} onClick={() => end.mutate(interlock)}>
            End bypass of {title}
          </GatedButton>
        )
      }
    >
      {bypass && `By ${bypass.by} until ${formatClock(bypass.untilAt)}: “${bypass.reason}”`}
      {end.error !== null && <ProblemNotice title="The bypass was not ended" error={end.error} />}
    </Notice>
  );
}
