import type { RigStatus } from '@cresthold/shared';
import type { EnvelopeDocument, ProofTestDue, Session } from '../../api/index.js';
import { obstacleFor } from '../auth/index.js';
import { dueText, isPressing } from '../envelopes/index.js';

/** Something on a rig that waits for a person. */
export interface Need {
  text: string;
  to: string;
  /** The person signed in may do it. */
  isYours: boolean;
}

/** What on a rig needs a person, most pressing first. */
export function needsOf(
  rigId: string,
  status: RigStatus | null,
  envelopes: readonly EnvelopeDocument[],
  session: Session,
): Need[] {
  const rigPage = `/rigs/${rigId}`;
  const envelopePage = `${rigPage}/envelope`;
  const may = (permission: Parameters<typeof obstacleFor>[0]) =>
    obstacleFor(permission, session.roles) === null;
  const needs: Need[] = [];
  if (status?.trip)
    needs.push({ text: 'Find the cause of the trip, then reset it', to: rigPage, isYours: may('rig.reset') });
  if (status?.isLockedOut)
    needs.push({ text: 'Lift the lockout when the work is done', to: rigPage, isYours: may('rig.lock-out') });
  if (status?.phase === 'offline')
    needs.push({ text: 'Bring the connection back', to: rigPage, isYours: true });
  if (status?.isPaused && status.runId) {
    needs.push({
      text: 'Resume or stop the paused run',
      to: `/runs/${status.runId}`,
      isYours: may('run.steer'),
    });
  }
  for (const envelope of envelopes) {
    if (envelope.status === 'submitted') {
      needs.push({
        text: `Decide on envelope version ${envelope.version}`,
        to: envelopePage,
        isYours: may('envelope.decide') && envelope.author !== session.account,
      });
    }
    if (envelope.status === 'returned' && envelope.author === session.account) {
      needs.push({
        text: `Mend the returned envelope version ${envelope.version}`,
        to: envelopePage,
        isYours: true,
      });
    }
  }
  const hasAny = envelopes.some(({ status: stage }) => stage === 'in-force' || stage === 'submitted');
  if (!hasAny)
    needs.push({ text: 'Have an envelope approved', to: envelopePage, isYours: may('envelope.draft') });
  return needs;
}

/** Proof tests that are due or fall due soon. */
export function proofTestNeeds(rigId: string, dues: readonly ProofTestDue[], session: Session): Need[] {
  return dues.filter(isPressing).map((due) => ({
    text: `Proof test of ${due.title}: ${dueText(due)}`,
    to: `/rigs/${rigId}/envelope`,
    isYours: obstacleFor('proof-test.do', session.roles) === null,
  }));
}
