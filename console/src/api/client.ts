import createClient from 'openapi-fetch';
import { networkProblem, problemFrom } from './problem.js';
import { fetchAsking } from './reauthentication.js';
import type { paths } from './schema.js';

/** The typed client of the API. `fetch` is looked up at each call, so that tests can stand in for the server. */
export const client = createClient<paths>({
  baseUrl: globalThis.location.origin,
  credentials: 'same-origin',
  fetch: fetchAsking,
});

interface Answer<Data> {
  data?: Data | undefined;
  error?: unknown;
  response: Response;
}

/**
 * The body of a good answer.
 *
 * @throws ApiProblem with the code of the problem details, or `network` where no answer came
 */
export async function answerOf<Data>(call: Promise<Answer<Data>>): Promise<Data> {
  let answer: Answer<Data>;
  try {
    answer = await call;
  } catch (error) {
    if (error instanceof DOMException && error.name === 'AbortError') throw error;
    throw networkProblem();
  }
  if (!answer.response.ok) throw problemFrom(answer.response.status, answer.error);
  return answer.data as Data;
}

/** The `If-Match` of a document that was read at this revision. */
export function ifMatch(revision: number): string {
  return `"${revision}"`;
}
