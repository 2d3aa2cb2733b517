import { keepPreviousData, queryOptions, useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import type { ChannelProbe } from '@cresthold/shared';
import {
  answerOf,
  client,
  ifMatch,
  type RigBody,
  type RigDocument,
  type ScanBudget,
  type SerialPort,
} from '../../../api/index.js';
import { envelopeKeys } from '../../envelopes/index.js';
import { rigKeys } from '../../rigs/index.js';

const serialPortsQuery = () =>
  queryOptions({
    queryKey: ['serial-ports'] as const,
    queryFn: async (): Promise<SerialPort[]> =>
      (await answerOf(client.GET('/api/v1/adapters/serial-ports'))).items,
  });

/** The serial ports of the server's machine. */
export function useSerialPorts() {
  return useQuery(serialPortsQuery());
}

/** What the scan of a draft would cost and what is wrong with it; the answer before stays until the next is there. */
export function useScanBudget(body: Record<string, unknown>) {
  return useQuery({
    queryKey: ['scan-budget', body] as const,
    queryFn: ({ signal }): Promise<ScanBudget> =>
      answerOf(client.POST('/api/v1/rigs/scan-budget', { body, signal })),
    placeholderData: keepPreviousData,
    gcTime: 10_000,
  });
}

/** Makes the rig, or changes it on top of a revision. */
export function useSaveRig() {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: ({ body, revision }: { body: Record<string, unknown>; revision: number | null }) => {
      // What a draft lacks is told by the server, field by field.
      const rig = body as RigBody;
      if (revision === null) return answerOf(client.POST('/api/v1/rigs', { body: rig }));
      const params = { path: { rigId: String(body['id']) }, header: { 'If-Match': ifMatch(revision) } };
      return answerOf(client.PUT('/api/v1/rigs/{rigId}', { params, body: rig }));
    },
    onSuccess: async (saved: RigDocument) => {
      queryClient.setQueryData(rigKeys.one(saved.id), saved);
      await Promise.all([
        queryClient.invalidateQueries({ queryKey: rigKeys.all, exact: true }),
        queryClient.invalidateQueries({ queryKey: envelopeKeys.ofRig(saved.id) }),
        queryClient.invalidateQueries({ queryKey: ['calibrations', saved.id] }),
      ]);
    },
  });
}

/** Live test of one channel as it is saved. */
export function probeChannel(rigId: string, channel: string): Promise<ChannelProbe> {
  const params = { path: { rigId, channel } };
  return answerOf(client.POST('/api/v1/rigs/{rigId}/channels/{channel}/probe', { params }));
}
