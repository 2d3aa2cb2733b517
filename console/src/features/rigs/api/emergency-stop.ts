import { answerOf, client, networkProblem } from '../../../api/index.js';

/** How long an emergency stop may stay unanswered before the screen says that it must not be relied on, ms. */
const answerWithinMs = 3000;

/**
 * Stops one rig, or every rig where none is named.
 *
 * @throws ApiProblem where the server refuses, cannot be reached or does not answer in time
 */
export async function emergencyStop(rigId: string | null): Promise<void> {
  const signal = AbortSignal.timeout(answerWithinMs);
  const body = { reason: 'Emergency stop pressed on the console' };
  const call =
    rigId === null
      ? client.POST('/api/v1/rigs/emergency-stop', { body, signal })
      : client.POST('/api/v1/rigs/{rigId}/emergency-stop', { params: { path: { rigId } }, body, signal });
  try {
    await answerOf<unknown>(call);
  } catch (error) {
    if (signal.aborted) throw networkProblem('The server did not answer within 3 seconds.');
    throw error;
  }
}
