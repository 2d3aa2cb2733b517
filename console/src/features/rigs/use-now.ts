import { useEffect, useState } from 'react';

const everyMs = 1000;

/** The wall clock of the viewer, ms since 1970, once a second. */
export function useNowMs(): number {
  const [nowMs, setNowMs] = useState(() => Date.now());
  useEffect(() => {
    const timer = setInterval(() => setNowMs(Date.now()), everyMs);
    return () => clearInterval(timer);
  }, []);
  return nowMs;
}
