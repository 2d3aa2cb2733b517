import { useCallback, useRef, useState } from 'react';
import type { ChannelProbe } from '@cresthold/shared';
import { asProblem } from '../../../api/index.js';
import { probeChannel } from '../api/wiring-queries.js';

/** What the live test of a channel stands at. */
export type TestState =
  { is: 'asked' } | { is: 'found'; probe: ChannelProbe } | { is: 'failed'; message: string };

export interface LiveTest {
  states: ReadonlyMap<string, TestState>;
  isBusy: boolean;
  test: (channels: readonly string[]) => void;
}

/** Tests channels one after the other: the wire takes one request at a time anyway. */
export function useLiveTest(rigId: string): LiveTest {
  const [states, setStates] = useState<ReadonlyMap<string, TestState>>(new Map());
  const [waiting, setWaiting] = useState(0);
  const tail = useRef(Promise.resolve());
  const test = useCallback(
    (channels: readonly string[]) => {
      const put = (id: string, state: TestState) => setStates((before) => new Map(before).set(id, state));
      setWaiting((count) => count + channels.length);
      for (const id of channels) {
        put(id, { is: 'asked' });
        tail.current = tail.current.then(async () => {
          try {
            put(id, { is: 'found', probe: await probeChannel(rigId, id) });
          } catch (error) {
            put(id, { is: 'failed', message: asProblem(error).message });
          }
          setWaiting((count) => count - 1);
        });
      }
    },
    [rigId],
  );
  return { states, isBusy: waiting > 0, test };
}
