import { useMemo, useState } from 'react';
import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import type { Channel, LiveTrace, Rig } from '@cresthold/shared';
import { Notice, Panel } from '../../../components/index.js';
import { TraceSheet } from '../../../components/trace-sheet/index.js';
import { useIsStale, useLiveTraces } from '../../../live/index.js';

type TraceChannel = Extract<Channel, { kind: 'trace' }>;

/** A panel for each trace channel of a rig, with the newest trace; nothing where it has none. */
export function LiveTraces({ rig }: { rig: Rig }) {
  const channels = rig.channels.filter((channel) => channel.kind === 'trace');
  if (channels.length === 0) return null;
  return (
    <Box sx={{ display: 'grid', gap: 2, gridTemplateColumns: 'minmax(0, 1fr)' }}>
      {channels.map((channel) => (
        <LiveTracePanel key={channel.id} rigId={rig.id} channel={channel} />
      ))}
    </Box>
  );
}

/** The newest trace of a channel over its axis, with those of the last seconds behind it. */
function LiveTracePanel({ rigId, channel }: { rigId: string; channel: TraceChannel }) {
  const { live, traces } = useLiveTraces(rigId, channel.id);
  const isStale = useIsStale(live);
  const [paused, setPaused] = useState<readonly LiveTrace[] | null>(null);
  const [isFitted, setFitted] = useState(false);
  const shown = paused ?? traces;
  const newest = shown.at(-1) ?? null;
  const earlier = useMemo(() => shown.slice(0, -1), [shown]);
  return (
    <Panel
      title={channel.title}
      isFlush
      actions={
        <>
          <Button
            aria-pressed={isFitted}
            variant={isFitted ? 'contained' : 'outlined'}
            onClick={() => setFitted(!isFitted)}
          >
            Fit values
          </Button>
          <Button
            aria-pressed={paused !== null}
            variant={paused === null ? 'outlined' : 'contained'}
            disabled={newest === null}
            onClick={() => setPaused(paused === null ? traces : null)}
          >
            {paused === null ? 'Pause' : 'Paused'}
          </Button>
        </>
      }
    >
      {newest === null ? (
        <Box sx={{ p: 1.5, color: 'text.secondary' }}>
          No trace yet: it is shown as soon as a good one comes from the rig.
        </Box>
      ) : (
        <>
          <TraceSheet
            channel={channel}
            newest={newest}
            earlier={earlier}
            isFitted={isFitted}
            isStale={isStale && paused === null}
          />
          {isStale && paused === null && (
            <Notice kind="warn" title="Not fresh" role="status">
              No good trace has come for some seconds: this is the last one.
            </Notice>
          )}
        </>
      )}
    </Panel>
  );
}
