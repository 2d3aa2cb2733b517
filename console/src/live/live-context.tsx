import {
  createContext,
  useContext,
  useEffect,
  useRef,
  useState,
  useSyncExternalStore,
  type ReactNode,
} from 'react';
import type { LiveTrace, RigStatus } from '@cresthold/shared';
import type { LinkState } from './live-client.js';
import type { LiveHub, RunListener } from './live-hub.js';
import type { RigSamples } from './sample-store.js';
import type { ChannelTraces } from './trace-store.js';

const LiveContext = createContext<LiveHub | null>(null);

export function LiveProvider({ hub, children }: { hub: LiveHub; children: ReactNode }) {
  return <LiveContext value={hub}>{children}</LiveContext>;
}

export function useLiveHub(): LiveHub {
  const hub = useContext(LiveContext);
  if (!hub) throw new Error('Live data was asked for outside its provider.');
  return hub;
}

export function useLinkState(): LinkState {
  const hub = useLiveHub();
  return useSyncExternalStore(hub.subscribeLink, hub.linkState);
}

/** The live status of a rig, or what the document said when it was loaded. */
export function useRigStatus(rigId: string, loaded: RigStatus | null = null): RigStatus | null {
  const { statuses } = useLiveHub();
  return useSyncExternalStore(statuses.subscribe, () => statuses.of(rigId)) ?? loaded;
}

/** Every rig's live status by its id. */
export function useRigStatuses(): ReadonlyMap<string, RigStatus> {
  const { statuses } = useLiveHub();
  return useSyncExternalStore(statuses.subscribe, statuses.all);
}

/** The live samples of a rig; asks for them while the component is shown. */
export function useRigSamples(rigId: string): RigSamples {
  const hub = useLiveHub();
  useEffect(() => hub.watchRig(rigId), [hub, rigId]);
  return hub.samples.of(rigId);
}

/** The last live traces of a channel, of a rig whose samples are asked for. */
export function useLiveTraces(
  rigId: string,
  channel: string,
): { live: ChannelTraces; traces: readonly LiveTrace[] } {
  const live = useLiveHub().traces.of(rigId, channel);
  return { live, traces: useSyncExternalStore(live.subscribe, () => live.traces) };
}

/** The newest value of a column at most `timesPerS` times a second; NaN where there is none. */
export function useLatestValue(samples: RigSamples, column: string, timesPerS = 5): number {
  const [shown, setShown] = useState(() => samples.ring.latest(column));
  useEffect(() => {
    let timer: ReturnType<typeof setTimeout> | null = null;
    const show = () => {
      timer = null;
      setShown(samples.ring.latest(column));
    };
    const unsubscribe = samples.subscribe(() => {
      timer ??= setTimeout(show, 1000 / timesPerS);
    });
    show();
    return () => {
      unsubscribe();
      if (timer !== null) clearTimeout(timer);
    };
  }, [samples, column, timesPerS]);
  return shown;
}

interface Arrivals {
  readonly receivedAtMs: number;
  readonly subscribe: (listener: () => void) => () => void;
}

/** True once nothing has come for `afterMs`: what is shown is then the past. */
export function useIsStale(source: Arrivals, afterMs = 2500): boolean {
  const isStaleNow = () => !(Date.now() - source.receivedAtMs < afterMs);
  const [isStale, setIsStale] = useState(isStaleNow);
  useEffect(() => {
    const look = () => setIsStale(!(Date.now() - source.receivedAtMs < afterMs));
    const unsubscribe = source.subscribe(look);
    const timer = setInterval(look, 500);
    return () => {
      unsubscribe();
      clearInterval(timer);
    };
  }, [source, afterMs]);
  return isStale;
}

/** Calls the listener for run events and changes while the component is shown. */
export function useRunMessages(listener: RunListener): void {
  const hub = useLiveHub();
  const latest = useRef(listener);
  useEffect(() => {
    latest.current = listener;
  });
  useEffect(
    () =>
      hub.watchRuns({
        onEvent: (runId, event) => latest.current.onEvent?.(runId, event),
        onChanged: (change) => latest.current.onChanged?.(change),
      }),
    [hub],
  );
}
