import Box from '@mui/material/Box';
import {
  marginTo,
  simpleThreshold,
  type EnvelopeContent,
  type Interlock,
  type InterlockView,
  type Rig,
  type RigStatus,
  type SimpleThreshold,
} from '@cresthold/shared';
import { Panel, plainNumber, Quantity } from '../../components/index.js';
import { useIsStale, useLatestValue, type RigSamples } from '../../live/index.js';
import { InterlockActions } from './interlock-actions.js';

type InterlockState = InterlockView['state'];

interface InterlockPanelProps {
  rig: Rig;
  status: RigStatus | null;
  envelope: EnvelopeContent | undefined;
  samples: RigSamples;
}

/** Every interlock in force: its condition, how far it is from acting, what it does. */
export function InterlockPanel({ rig, status, envelope, samples }: InterlockPanelProps) {
  const interlocks = envelope?.interlocks ?? [];
  return (
    <Panel title="Interlocks" isFlush>
      {interlocks.length === 0 && (
        <Box sx={{ p: 1.5, color: 'text.secondary' }}>
          {envelope ? 'The envelope has none.' : 'No envelope is in force.'}
        </Box>
      )}
      <Box component="ul" sx={{ m: 0, p: 0, listStyle: 'none' }}>
        {interlocks.map((interlock) => (
          <InterlockRow
            key={interlock.id}
            interlock={interlock}
            view={status?.interlocks.find(({ id }) => id === interlock.id) ?? null}
            rig={rig}
            samples={samples}
          />
        ))}
      </Box>
    </Panel>
  );
}

interface InterlockRowProps {
  interlock: Interlock;
  view: InterlockView | null;
  rig: Rig;
  samples: RigSamples;
}

function InterlockRow({ interlock, view, rig, samples }: InterlockRowProps) {
  const state = view?.state ?? null;
  const threshold = simpleThreshold(interlock.condition);
  return (
    <Box component="li" sx={{ p: 1.5, '& + &': { borderTop: 1, borderColor: 'divider' } }}>
      <Box sx={{ display: 'flex', flexWrap: 'wrap', columnGap: 2, justifyContent: 'space-between' }}>
        <Box component="span" sx={{ fontWeight: 700 }}>
          {interlock.title}
        </Box>
        <span>
          {view?.isForced && <Mark>proof test</Mark>}
          {view?.isBypassed && <Mark>bypassed</Mark>}
          <StateWord state={state} action={interlock.action} />
        </span>
      </Box>
      <Box
        sx={{
          display: 'flex',
          flexWrap: 'wrap',
          columnGap: 2,
          justifyContent: 'space-between',
          fontSize: '0.75rem',
          color: 'text.secondary',
        }}
      >
        <span>
          {interlock.action} when {interlock.condition}
          {interlock.delayS > 0 && ` for ${plainNumber(interlock.delayS)} s`}
        </span>
        {threshold && <Margin threshold={threshold} rig={rig} samples={samples} />}
      </Box>
      {(state === 'acted' || state === 'latched') && (
        <Box sx={{ fontSize: '0.8125rem' }}>{interlock.message}</Box>
      )}
      {view && <InterlockActions rigId={rig.id} interlock={interlock} view={view} />}
    </Box>
  );
}

const stateWords = {
  pending: '◔ pending',
  acted: '▲ acted',
  latched: '▲ latched: waits to be acknowledged',
} as const;

function Mark({ children }: { children: string }) {
  return (
    <Box component="span" sx={{ fontWeight: 700, color: 'paper.warn', mr: 1 }}>
      {children}
    </Box>
  );
}

function StateWord({ state, action }: { state: InterlockState | null; action: Interlock['action'] }) {
  if (state === null)
    return (
      <Box component="span" sx={{ color: 'text.secondary' }}>
        not judged
      </Box>
    );
  if (state === 'clear') return <span>clear</span>;
  const isTrip = state === 'acted' && action === 'trip';
  return (
    <Box component="span" sx={{ fontWeight: 700, color: isTrip ? 'paper.trip' : 'paper.warn' }}>
      {stateWords[state]}
    </Box>
  );
}

function Margin({ threshold, rig, samples }: { threshold: SimpleThreshold; rig: Rig; samples: RigSamples }) {
  const value = useLatestValue(samples, threshold.channel);
  const isStale = useIsStale(samples);
  const channel = rig.channels.find(({ id }) => id === threshold.channel);
  if (!channel) return null;
  return (
    <span>
      margin{' '}
      <Quantity
        value={marginTo(threshold, value)}
        unit={channel.unit}
        decimals={channel.display.decimals}
        isStale={isStale}
      />
    </span>
  );
}
