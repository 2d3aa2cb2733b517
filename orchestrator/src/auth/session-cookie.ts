import type { CookieOptions } from 'express';

export const sessionCookieName = 'cresthold_session';

/** What of the configuration the cookie depends on. */
export interface CookieConfig {
  isHttps: boolean;
  sessionMaxS: number;
}

export function sessionCookieOptions({ isHttps, sessionMaxS }: CookieConfig): CookieOptions {
  return {
    httpOnly: true,
    sameSite: 'strict',
    secure: isHttps,
    path: '/',
    maxAge: sessionMaxS * 1000,
  };
}

/** The token of the session in a Cookie header; null where there is none. */
export function readSessionCookie(header: string | undefined): string | null {
  for (const part of (header ?? '').split(';')) {
    const [name, value] = part.trim().split('=', 2);
    if (name === sessionCookieName && value !== undefined && value !== '') return value;
  }
  return null;
}
