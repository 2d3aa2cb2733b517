import { useEffect } from 'react';
import { noteAttendance } from '../../api/index.js';
import { useSessionQuery } from './api/get-session.js';

/** Told to the server at most this often. */
const tellEveryMs = 60_000;

/** Tells the server that somebody is at the page, so that reading and thinking end no session. */
export function useAttendance(isSignedIn: boolean): void {
  const { refetch } = useSessionQuery();
  useEffect(() => {
    if (!isSignedIn) return;
    noteAttendance();
    let lastToldMs = Date.now();
    const tell = () => {
      if (Date.now() - lastToldMs < tellEveryMs) return;
      lastToldMs = Date.now();
      void refetch();
    };
    const events = ['pointerdown', 'keydown', 'wheel'] as const;
    for (const event of events) globalThis.addEventListener(event, tell, { passive: true });
    return () => {
      for (const event of events) globalThis.removeEventListener(event, tell);
    };
  }, [isSignedIn, refetch]);
}
