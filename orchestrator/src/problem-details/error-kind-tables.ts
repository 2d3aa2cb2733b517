import type { ErrorKind } from '@cresthold/shared';

/** HTTP status of each kind of error; a new kind without one does not compile. */
export const statusOfKind: Record<ErrorKind, number> = {
  invalid: 400,
  unauthenticated: 401,
  forbidden: 403,
  'not-found': 404,
  conflict: 409,
  'not-allowed-now': 409,
  'too-many': 429,
  unavailable: 503,
  timeout: 504,
  'device-fault': 502,
  bug: 500,
};

export type ErrorLogLevel = 'error' | 'warn' | 'debug';

/** How loud each kind is in the log: what the caller did wrong is no news for whoever runs the server. */
export const logLevelOfKind: Record<ErrorKind, ErrorLogLevel> = {
  invalid: 'debug',
  unauthenticated: 'debug',
  forbidden: 'debug',
  'not-found': 'debug',
  conflict: 'debug',
  'not-allowed-now': 'debug',
  'too-many': 'warn',
  unavailable: 'warn',
  timeout: 'warn',
  'device-fault': 'warn',
  bug: 'error',
};
