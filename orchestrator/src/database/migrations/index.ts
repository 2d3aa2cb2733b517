import { Initial1796083200000 } from './1796083200000-initial.js';

/** Every migration, oldest first; a released one is never changed. */
export const migrations = [Initial1796083200000];
