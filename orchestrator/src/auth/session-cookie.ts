import type { CookieOptions } from 'express';

export const sessionCookieName = 'cresthold_session';

/** A shift and a half: nobody is signed out in the middle of a run's shift. */
export const sessionLifetimeS = 12 * 3600;

export function sessionCookieOptions(isHttps: boolean): CookieOptions {
  return {
    httpOnly: true,
    sameSite: 'strict',
    secure: isHttps,
    path: '/',
    maxAge: sessionLifetimeS * 1000,
  };
}

/** The session in a Cookie header; null where there is none. */
export function readSessionCookie(header: string | undefined): string | null {
  for (const part of (header ?? '').split(';')) {
    const [name, value] = part.trim().split('=', 2);
    if (name === sessionCookieName && value !== undefined && value !== '') return value;
  }
  return null;
}
