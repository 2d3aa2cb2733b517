import { createContext, useContext, type ReactNode } from 'react';
import type { Session } from '../../api/index.js';
import { obstacleFor, type Permission } from './permissions.js';

const SessionContext = createContext<Session | null>(null);

export function SessionProvider({ session, children }: { session: Session; children: ReactNode }) {
  return <SessionContext value={session}>{children}</SessionContext>;
}

/** Who is signed in; only inside the signed-in part of the console. */
export function useSession(): Session {
  const session = useContext(SessionContext);
  if (!session) throw new Error('The session was asked for outside the signed-in part.');
  return session;
}

/** Why the person signed in may not do something, in words; null where they may. */
export function useObstacle(permission: Permission): string | null {
  return obstacleFor(permission, useSession().roles);
}
