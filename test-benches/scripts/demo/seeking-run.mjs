// Gets the seeking run of the demo going, over the API like any script.
import { randomUUID } from 'node:crypto';
import { signIn, until } from './api.mjs';

/**
 * Arms the rig and starts the newest version of its experiment.
 *
 * @returns the address of the run's page, below that of the server
 */
export async function startSeeking(base, { rigId, experimentId, by, password }) {
  const call = await signIn(base, by, password);
  const status = await untilReady(call, rigId);
  if (status.runId !== null) return `/runs/${status.runId}`;
  if (status.phase === 'idle') await call('POST', `/rigs/${rigId}/arm`);
  const run = await call('POST', '/runs', { experimentId }, { 'idempotency-key': randomUUID() });
  return `/runs/${run.id}`;
}

/** Waits for the burner to light and the rig to be clear; what forbids it for good is told at once. */
async function untilReady(call, rigId) {
  let last = null;
  try {
    return await until(30_000, 'The rig was not ready', async () => {
      last = await call('GET', `/rigs/${rigId}/status`);
      if (last.trip !== null) throw new Error(`The rig is tripped: ${last.trip.message}`);
      if (last.isLockedOut) throw new Error('The rig is locked out.');
      const isClear = last.phase === 'idle' && last.armingObstacles.length === 0;
      return isClear || last.phase === 'armed' || last.phase === 'running' ? last : null;
    });
  } catch (error) {
    const obstacles = last?.armingObstacles ?? [];
    throw new Error([error.message, ...obstacles].join(' '), { cause: error });
  }
}
