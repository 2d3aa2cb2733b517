import type { RigStatus } from '@cresthold/shared';
import { answerOf, client } from '../../../api/index.js';

/** How long the rig goes on moving after the last renewal, s. */
export const holdForS = 1;

export interface HeldMoveOrder {
  rigId: string;
  channel: string;
  /** Where to, in the channel's unit. */
  value: number;
  /** Names the press. */
  holdId: string;
}

/**
 * Begins a held move or renews it.
 *
 * @throws ApiProblem where the server refuses, cannot be reached or does not answer within the hold
 */
export function holdMove({ rigId, channel, value, holdId }: HeldMoveOrder): Promise<RigStatus> {
  const body = { channel, value, hold: { id: holdId, forS: holdForS } };
  const signal = AbortSignal.timeout(holdForS * 1000);
  return answerOf(client.POST('/api/v1/rigs/{rigId}/moves', { params: { path: { rigId } }, body, signal }));
}

/** Ends a held move; also when the page is just going away. Without it the hold runs out by itself. */
export function releaseMove({ rigId, channel, holdId }: Omit<HeldMoveOrder, 'value'>): Promise<RigStatus> {
  const params = { path: { rigId } };
  const body = { channel, holdId };
  return answerOf(client.POST('/api/v1/rigs/{rigId}/moves/release', { params, body, keepalive: true }));
}
