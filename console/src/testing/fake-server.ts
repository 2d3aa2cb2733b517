import { vi } from 'vitest';
import type { ErrorCode, FieldFault } from '@cresthold/shared';
import { unhandled } from './setup.js';

export interface FakeRequest {
  method: string;
  path: string;
  body: unknown;
  headers: Headers;
}

export type Handler = (request: FakeRequest) => Response | Promise<Response>;

export const json = (body: unknown, status = 200): Response => Response.json(body, { status });

export const list =
  (...items: unknown[]): Handler =>
  () =>
    json({ items, nextCursor: null });

/** Problem details as the server sends them. */
export function problem(
  status: number,
  code: ErrorCode,
  detail: string,
  errors: FieldFault[] = [],
): Response {
  return new Response(
    JSON.stringify({ type: `/errors#${code}`, title: code, status, detail, code, errors }),
    {
      status,
      headers: { 'Content-Type': 'application/problem+json' },
    },
  );
}

/**
 * Stands in for the server: handlers by `METHOD /path` below /api/v1. A request without one fails the test.
 *
 * @returns the requests that came, in order
 */
export function serve(handlers: Record<string, Handler>): FakeRequest[] {
  const seen: FakeRequest[] = [];
  vi.stubGlobal('fetch', async (request: Request) => {
    const path = new URL(request.url).pathname.replace('/api/v1', '');
    const text = await request.text();
    const came: FakeRequest = {
      method: request.method,
      path,
      body: text === '' ? undefined : JSON.parse(text),
      headers: request.headers,
    };
    seen.push(came);
    const handler = handlers[`${request.method} ${path}`];
    if (handler) return handler(came);
    unhandled.push(`${request.method} ${path}`);
    return problem(404, 'request.not-found', 'No handler.');
  });
  return seen;
}
