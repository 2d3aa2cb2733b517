import { isAttended } from './attendance.js';

/** Asks for the password again. @returns whether it was given, and taken */
type Ask = () => Promise<boolean>;

const refusedCode = 'auth.reauthentication-needed';
let ask: Ask | null = null;
let asking: Promise<boolean> | null = null;

/** Says who asks; null where nobody does any more. */
export function askForPasswordWith(asker: Ask | null): void {
  ask = asker;
}

/** As `fetch`; where the server wants the password again it is asked for, and the request sent once more. */
export async function fetchAsking(request: Request): Promise<Response> {
  if (!isAttended()) request.headers.set('X-Unattended', 'true');
  const again = request.clone();
  const response = await globalThis.fetch(request);
  if (response.status !== 403 || ask === null || !(await wantsPassword(response))) return response;
  // Two requests that are refused at once ask once.
  asking ??= ask().finally(() => (asking = null));
  return (await asking) ? globalThis.fetch(again) : response;
}

async function wantsPassword(response: Response): Promise<boolean> {
  const problem: unknown = await response
    .clone()
    .json()
    .catch(() => null);
  return typeof problem === 'object' && problem !== null && 'code' in problem && problem.code === refusedCode;
}
