import { useMutation, useQueryClient } from '@tanstack/react-query';
import type { EnvelopeContent } from '@cresthold/shared';
import { answerOf, client, ifMatch, type EnvelopeDocument } from '../../../api/index.js';
import { envelopeKeys } from './envelope-queries.js';

/** A change of one of a rig's envelopes; the list is read again afterwards. */
function useEnvelopeChange<Input>(rigId: string, change: (input: Input) => Promise<EnvelopeDocument>) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: change,
    onSettled: () => queryClient.invalidateQueries({ queryKey: envelopeKeys.ofRig(rigId) }),
  });
}

export function useCreateDraft(rigId: string) {
  return useEnvelopeChange(rigId, (content: EnvelopeContent) =>
    answerOf(
      client.POST('/api/v1/rigs/{rigId}/envelopes', { params: { path: { rigId } }, body: { content } }),
    ),
  );
}

interface DraftChange {
  id: string;
  revision: number;
  content: EnvelopeContent;
}

export function useSaveDraft(rigId: string) {
  return useEnvelopeChange(rigId, ({ id, revision, content }: DraftChange) =>
    answerOf(
      client.PUT('/api/v1/envelopes/{id}', {
        params: { path: { id }, header: { 'If-Match': ifMatch(revision) } },
        body: { content },
      }),
    ),
  );
}

const at = (id: string) => ({ params: { path: { id } } });

export function useSubmitDraft(rigId: string) {
  return useEnvelopeChange(rigId, (id: string) =>
    answerOf(client.POST('/api/v1/envelopes/{id}/submit', at(id))),
  );
}

interface Decision {
  id: string;
  /** Revision that was read: a decision on anything else is refused. */
  revision: number;
  reason: string;
}

const decided = ({ id, revision, reason }: Decision) => ({
  params: { path: { id }, header: { 'If-Match': ifMatch(revision) } },
  body: { reason },
});

export function useApprove(rigId: string) {
  return useEnvelopeChange(rigId, (decision: Decision) =>
    answerOf(client.POST('/api/v1/envelopes/{id}/approve', decided(decision))),
  );
}

export function useReturn(rigId: string) {
  return useEnvelopeChange(rigId, (decision: Decision) =>
    answerOf(client.POST('/api/v1/envelopes/{id}/return', decided(decision))),
  );
}
