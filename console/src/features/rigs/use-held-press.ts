import { useCallback, useEffect, useRef, useState } from 'react';
import { useLiveHub } from '../../live/index.js';
import { holdMove, releaseMove } from './api/held-moves.js';
import { HeldPress } from './held-press.js';

/**
 * Moves an actuator while something is held. Whatever takes the person's hand or eye away ends it: another
 * window, a hidden tab, a page that goes away, this part of the page being taken down.
 */
export function useHeldPress(rigId: string, channel: string) {
  const { statuses } = useLiveHub();
  const press = useRef<HeldPress | null>(null);
  const [heldName, setHeldName] = useState<string | null>(null);
  const [error, setError] = useState<unknown>(null);

  const end = useCallback(() => press.current?.end(), []);
  /** @param name of the control that is held, so that it alone is shown so */
  const begin = useCallback(
    (name: string, value: number) => {
      press.current?.end();
      setError(null);
      setHeldName(name);
      press.current = new HeldPress({
        hold: async (holdId) => statuses.take(await holdMove({ rigId, channel, value, holdId })),
        release: (holdId) => void releaseMove({ rigId, channel, holdId }).catch(() => undefined),
        onEnd: (reason) => {
          press.current = null;
          setHeldName(null);
          setError(reason);
        },
      });
    },
    [rigId, channel, statuses],
  );

  useEffect(() => {
    const onVisibility = () => document.hidden && end();
    window.addEventListener('blur', end);
    window.addEventListener('pagehide', end);
    window.addEventListener('offline', end);
    document.addEventListener('visibilitychange', onVisibility);
    return () => {
      end();
      window.removeEventListener('blur', end);
      window.removeEventListener('pagehide', end);
      window.removeEventListener('offline', end);
      document.removeEventListener('visibilitychange', onVisibility);
    };
  }, [end]);

  return { heldName, error, begin, end };
}
