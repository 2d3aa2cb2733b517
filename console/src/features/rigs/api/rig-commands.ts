import { useMutation } from '@tanstack/react-query';
import { answerOf, client } from '../../../api/index.js';
import { useLiveHub } from '../../../live/index.js';
import type { RigStatus, WireFault, WireFaultKind } from '@cresthold/shared';

/** A command whose answer is the rig's new status; screens show it at once, ahead of the live link. */
export function useRigCommand<Input>(command: (input: Input) => Promise<RigStatus>) {
  const { statuses } = useLiveHub();
  return useMutation({ mutationFn: command, onSuccess: (status) => statuses.take(status) });
}

const at = (rigId: string) => ({ params: { path: { rigId } } });

export function useArm(rigId: string) {
  return useRigCommand(() => answerOf(client.POST('/api/v1/rigs/{rigId}/arm', at(rigId))));
}

export function useDisarm(rigId: string) {
  return useRigCommand(() => answerOf(client.POST('/api/v1/rigs/{rigId}/disarm', at(rigId))));
}

export function useReset(rigId: string) {
  return useRigCommand((reason: string) =>
    answerOf(client.POST('/api/v1/rigs/{rigId}/reset', { ...at(rigId), body: { reason } })),
  );
}

/** Puts a fault on a connection of a bench; null takes it off. */
export function useInjectFault(rigId: string, connection: string) {
  return useRigCommand((fault: ({ kind: WireFaultKind } & Record<string, unknown>) | null) => {
    const params = { path: { rigId, connection } };
    // What a form gives is judged by the server, field by field, and what it leaves out has a default there.
    const body = { fault: fault as WireFault | null };
    return answerOf(client.PUT('/api/v1/rigs/{rigId}/connections/{connection}/fault', { params, body }));
  });
}
