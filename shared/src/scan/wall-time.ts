/**
 * The ISO 8601 text of a wall time that was given.
 *
 * @param atMs ms since 1970, UTC
 * @example
 * isoTime(0) // '1970-01-01T00:00:00.000Z'
 */
export function isoTime(atMs: number): string {
  // eslint-disable-next-line no-restricted-globals -- formats a time that was passed in, reads no clock
  return new Date(atMs).toISOString();
}
