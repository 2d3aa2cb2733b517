import Box from '@mui/material/Box';
import type { Rig, RigStatus } from '@cresthold/shared';
import { formatNumber, Panel } from '../../components/index.js';
import { InjectedFaultNotice } from './injected-fault-notice.js';

/** The wires of the rig and how the scan fares on them. */
export function ConnectionPanel({ rig, status }: { rig: Rig; status: RigStatus | null }) {
  return (
    <Panel title="Connections and scan">
      <Box component="ul" sx={{ m: 0, p: 0, listStyle: 'none', display: 'grid', gap: 1 }}>
        {rig.connections.map((connection) => {
          const state = status?.connections.find(({ id }) => id === connection.id);
          return (
            <Box component="li" key={connection.id}>
              <Box sx={{ display: 'flex', flexWrap: 'wrap', columnGap: 2, justifyContent: 'space-between' }}>
                <span>
                  {connection.title}{' '}
                  <Box component="span" sx={{ color: 'text.secondary' }}>
                    {connection.adapter}
                  </Box>
                </span>
                <ConnectionState isConnected={state?.isConnected} />
              </Box>
              {state?.injectedFault && <InjectedFaultNotice injected={state.injectedFault} />}
              {state?.error && <Box sx={{ fontSize: '0.8125rem', color: 'paper.warn' }}>{state.error}</Box>}
            </Box>
          );
        })}
      </Box>
      {status && status.channelFaults.length > 0 && <ChannelFaults rig={rig} faults={status.channelFaults} />}
      {status && <ScanFacts scan={status.scan} periodMs={rig.periodMs} />}
    </Panel>
  );
}

/** Channels that do not come through although their connection is up. */
function ChannelFaults({ rig, faults }: { rig: Rig; faults: RigStatus['channelFaults'] }) {
  const titleOf = (id: string) => rig.channels.find((channel) => channel.id === id)?.title ?? id;
  return (
    <Box
      component="ul"
      aria-label="Channels that cannot be read"
      sx={{ m: 0, mt: 1, p: 0, listStyle: 'none', display: 'grid', gap: 0.75, fontSize: '0.8125rem' }}
    >
      {faults.map((fault) => (
        <Box component="li" key={fault.channel} sx={{ color: 'paper.warn' }}>
          <strong>{titleOf(fault.channel)}</strong>: {fault.message}
        </Box>
      ))}
    </Box>
  );
}

function ConnectionState({ isConnected }: { isConnected: boolean | undefined }) {
  if (isConnected === undefined)
    return (
      <Box component="span" sx={{ color: 'text.secondary' }}>
        not known
      </Box>
    );
  if (isConnected) return <span>connected</span>;
  return (
    <Box component="span" sx={{ color: 'paper.warn', fontWeight: 700 }}>
      ✕ not connected
    </Box>
  );
}

function ScanFacts({ scan, periodMs }: { scan: RigStatus['scan']; periodMs: number }) {
  const facts = [
    ['Period', `${periodMs} ms`],
    ['Scans', formatNumber(scan.count, 0)],
    ['Overruns', formatNumber(scan.overruns, 0)],
    ['Lateness, 99 of 100 below', `${formatNumber(scan.latenessP99Ms, 1)} ms`],
    ['Time on the wire', `${formatNumber(scan.wireMeanMs, 1)} ms`],
  ] as const;
  return (
    <Box
      component="dl"
      sx={{
        m: 0,
        mt: 1.5,
        pt: 1,
        borderTop: 1,
        borderColor: 'divider',
        display: 'grid',
        gridTemplateColumns: '1fr auto',
        columnGap: 2,
        fontSize: '0.75rem',
      }}
    >
      {facts.map(([name, value]) => (
        <Box
          key={name}
          sx={{
            display: 'contents',
            '& dt': { color: 'text.secondary' },
            '& dd': { m: 0, textAlign: 'right' },
          }}
        >
          <dt>{name}</dt>
          <dd>{value}</dd>
        </Box>
      ))}
    </Box>
  );
}
