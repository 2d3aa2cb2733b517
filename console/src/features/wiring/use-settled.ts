import { useEffect, useState } from 'react';

/** A value once it has not changed for a while, so that not every key is asked about. */
export function useSettled<T>(value: T, forMs: number): T {
  const [settled, setSettled] = useState(value);
  useEffect(() => {
    const timer = setTimeout(() => setSettled(value), forMs);
    return () => clearTimeout(timer);
  }, [value, forMs]);
  return settled;
}
