// The few calls of the API that the demo makes, as one of its people.
import { setTimeout as wait } from 'node:timers/promises';

/** Waits until the server says that it is well. */
export async function untilHealthy(base, timeoutMs) {
  await until(timeoutMs, `The server at ${base} was not ready`, async () => {
    const response = await fetch(`${base}/api/v1/health`).catch(() => null);
    await response?.arrayBuffer();
    return response?.ok ?? false;
  });
}

/** Polls until `isDone` answers with something true, and gives that back. */
export async function until(timeoutMs, what, isDone) {
  const endMs = Date.now() + timeoutMs;
  for (;;) {
    const outcome = await isDone();
    if (outcome) return outcome;
    if (Date.now() > endMs) throw new Error(`${what} within ${timeoutMs / 1000} s.`);
    await wait(300);
  }
}

/** Signs in and returns a caller that carries the session. */
export async function signIn(base, account, password) {
  const response = await send(base, 'POST', '/auth/sign-in', { account, password });
  const cookie = response.headers
    .getSetCookie()
    .map((text) => text.split(';')[0])
    .join('; ');
  return async (method, path, body, headers = {}) => {
    const answer = await send(base, method, path, body, { cookie, ...headers });
    const text = await answer.text();
    return text === '' ? null : JSON.parse(text);
  };
}

async function send(base, method, path, body, headers = {}) {
  const response = await fetch(`${base}/api/v1${path}`, {
    method,
    headers: { ...(body === undefined ? {} : { 'content-type': 'application/json' }), ...headers },
    body: body === undefined ? undefined : JSON.stringify(body),
  });
  if (response.ok) return response;
  const problem = await response.json().catch(() => ({}));
  const details = (problem.errors ?? []).map(({ field, message }) => `${field}: ${message}`);
  const text = [problem.detail ?? problem.title ?? `status ${response.status}`, ...details].join(' ');
  throw new Error(`${method} ${path}: ${text}`);
}
