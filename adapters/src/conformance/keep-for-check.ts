import type { Adapter, AdapterSession } from '../contract.js';
import { keepConnected } from '../keep-connected.js';

/** A connection that is kept open as the rig host does it, with short waits, and what happened to it. */
export interface KeptForCheck<Address> {
  /** Codes of the losses so far. */
  readonly losses: string[];
  /** The next session that is handed out. */
  nextSession(): Promise<AdapterSession<Address>>;
  close(): Promise<void>;
}

export function keepForCheck<Configuration, Address>(
  adapter: Adapter<Configuration, Address>,
  configuration: Configuration,
): KeptForCheck<Address> {
  const losses: string[] = [];
  const opened: AdapterSession<Address>[] = [];
  let taken = 0;
  let wake: () => void = () => undefined;
  const kept = keepConnected<Configuration, Address>(
    adapter,
    configuration,
    {
      onOpen: (session) => {
        opened.push(session);
        wake();
      },
      onLost: (error) => losses.push(error.code),
    },
    { firstDelayMs: 5, mostDelayMs: 50 },
  );
  const next = async (index: number): Promise<AdapterSession<Address>> => {
    for (;;) {
      const session = opened[index];
      if (session) return session;
      await new Promise<void>((resolve) => (wake = resolve));
    }
  };
  return { losses, nextSession: () => next(taken++), close: () => kept.close() };
}
