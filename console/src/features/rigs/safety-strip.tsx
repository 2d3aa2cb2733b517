import Box from '@mui/material/Box';
import { useRigs } from './api/rig-queries.js';
import { EmergencyStopButton } from './emergency-stop-button.js';
import { LinkNotice } from './link-notice.js';
import { RigStrip } from './rig-strip.js';
import { useRigIdInView } from './rig-in-view.js';
import { StopAllButton } from './stop-all-button.js';
import { StopOutcomeNotice } from './stop-outcome-notice.js';
import { useEmergencyStop } from './use-emergency-stop.js';

/** At the top of every page: the state of every rig and the emergency stop of the rig in view. */
export function SafetyStrip() {
  const rigs = useRigs();
  const rigId = useRigIdInView();
  const { outcome, press, dismiss } = useEmergencyStop(rigId);
  const all = useEmergencyStop(null);
  const rigTitle =
    rigId === null ? null : (rigs.data?.find((rig) => rig.id === rigId)?.content.title ?? rigId);
  return (
    <Box
      component="section"
      aria-label="Rigs and emergency stop"
      sx={{ bgcolor: 'background.paper', borderBottom: 1, borderColor: 'text.primary' }}
    >
      <Box sx={{ display: 'flex', flexWrap: 'wrap', alignItems: 'center' }}>
        <RigStrip rigs={rigs.data ?? []} rigIdInView={rigId} />
        <Box sx={{ px: 1.5, py: 0.75, ml: 'auto', display: 'flex', flexWrap: 'wrap', gap: 1.5 }}>
          {rigId !== null && (
            <StopAllButton isSending={all.outcome.state === 'sending'} onPress={all.press} />
          )}
          <EmergencyStopButton rigTitle={rigTitle} state={outcome.state} onPress={press} />
        </Box>
      </Box>
      <StopOutcomeNotice outcome={outcome} what={rigTitle ?? 'All rigs'} onDismiss={dismiss} />
      {rigId !== null && <StopOutcomeNotice outcome={all.outcome} what="All rigs" onDismiss={all.dismiss} />}
      <LinkNotice />
    </Box>
  );
}
