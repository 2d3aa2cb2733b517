export { sessionQuery, useSessionQuery } from './api/get-session.js';
export { useSignOut } from './api/sign-out.js';
export { useAttendance } from './attendance.js';
export { ReauthenticationDialog } from './reauthentication-dialog.js';
export { PasswordHint, passwordObstacle } from './password-hint.js';
export { SessionList } from './session-list.js';
export { obstacleFor, permissions, roleTitles, type Permission } from './permissions.js';
export { SessionProvider, useObstacle, useSession } from './session-context.js';
