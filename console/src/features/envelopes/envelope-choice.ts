import type { EnvelopeStatus } from '@cresthold/shared';
import type { EnvelopeDocument } from '../../api/index.js';

export const stageTexts: Record<EnvelopeStatus, string> = {
  draft: 'draft',
  submitted: 'waits for approval',
  returned: 'returned to its author',
  'in-force': 'in force',
  superseded: 'superseded',
};

export const canBeEdited = (envelope: EnvelopeDocument, account: string): boolean =>
  envelope.author === account && (envelope.status === 'draft' || envelope.status === 'returned');

/**
 * The version to show: the one asked for, else what the person has to work on, else what waits for
 * approval, else what is in force, else the newest.
 */
export function chosenEnvelope(
  envelopes: readonly EnvelopeDocument[],
  asked: number | null,
  account: string,
): EnvelopeDocument | undefined {
  return (
    envelopes.find(({ version }) => version === asked) ??
    envelopes.find((envelope) => canBeEdited(envelope, account)) ??
    envelopes.find(({ status }) => status === 'submitted') ??
    envelopes.find(({ status }) => status === 'in-force') ??
    envelopes[0]
  );
}
