export { sessionQuery, useSessionQuery } from './api/get-session.js';
export { useSignOut } from './api/sign-out.js';
export { obstacleFor, permissions, roleTitles, type Permission } from './permissions.js';
export { SessionProvider, useObstacle, useSession } from './session-context.js';
