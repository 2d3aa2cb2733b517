import type { NextFunction, Request, Response } from 'express';

/**
 * What pages of this server may load: their own files and nothing else. Inline styles stay allowed because
 * the console's style library writes them at run time.
 */
const contentSecurityPolicy = [
  "default-src 'self'",
  "script-src 'self'",
  "style-src 'self' 'unsafe-inline'",
  "img-src 'self' data: blob:",
  "font-src 'self'",
  "connect-src 'self'",
  "worker-src 'self' blob:",
  "object-src 'none'",
  "base-uri 'none'",
  "form-action 'self'",
  "frame-ancestors 'none'",
].join('; ');

const headers = {
  'Content-Security-Policy': contentSecurityPolicy,
  'Cross-Origin-Opener-Policy': 'same-origin',
  'Cross-Origin-Resource-Policy': 'same-origin',
  'Permissions-Policy': 'camera=(), geolocation=(), microphone=()',
  'Referrer-Policy': 'no-referrer',
  'X-Content-Type-Options': 'nosniff',
  'X-Frame-Options': 'DENY',
};

/** Sets the headers that keep other sites out of these pages, on every answer. */
export function securityHeaders(isHttps: boolean) {
  return (request: Request, response: Response, next: NextFunction): void => {
    response.set(headers);
    if (isHttps) response.set('Strict-Transport-Security', 'max-age=31536000');
    if (request.path.startsWith('/api/')) {
      // What people and rigs do is nothing for a cache; and the ETag of a rig is that of its wiring, not of its
      // state, so a question whether it has changed is always answered in full.
      response.set('Cache-Control', 'no-store');
      delete request.headers['if-none-match'];
    }
    next();
  };
}
