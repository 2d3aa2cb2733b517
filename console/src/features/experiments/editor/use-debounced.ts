import { useEffect, useState } from 'react';

/** A value that follows once it has stood still for a while. */
export function useDebounced<T>(value: T, waitMs: number): T {
  const [settled, setSettled] = useState(value);
  useEffect(() => {
    const timer = setTimeout(() => setSettled(value), waitMs);
    return () => clearTimeout(timer);
  }, [value, waitMs]);
  return settled;
}
