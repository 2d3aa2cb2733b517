import { queryOptions, useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import type { CalibrationContent } from '@cresthold/shared';
import { answerOf, client, type CalibrationDocument } from '../../../api/index.js';
import { envelopeKeys } from '../../envelopes/index.js';

export const calibrationKeys = { ofRig: (rigId: string) => ['calibrations', rigId] as const };

/** Every calibration of a rig's sensors, newest first. */
const calibrationsQuery = (rigId: string) =>
  queryOptions({
    queryKey: calibrationKeys.ofRig(rigId),
    queryFn: async (): Promise<CalibrationDocument[]> => {
      const params = { path: { rigId }, query: { limit: 200 } };
      return (await answerOf(client.GET('/api/v1/rigs/{rigId}/calibrations', { params }))).items;
    },
  });

export function useCalibrations(rigId: string) {
  return useQuery(calibrationsQuery(rigId));
}

function useCalibrationChange<Input, Answer>(rigId: string, change: (input: Input) => Promise<Answer>) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: change,
    onSuccess: () =>
      Promise.all([
        queryClient.invalidateQueries({ queryKey: calibrationKeys.ofRig(rigId) }),
        queryClient.invalidateQueries({ queryKey: envelopeKeys.ofRig(rigId) }),
      ]),
  });
}

export interface NewCalibration {
  channel: string;
  content: CalibrationContent;
  /** Uploaded with it; null for none. */
  certificate: File | null;
}

/** Puts a calibration in force, and its certificate with it. */
export function usePutInForce(rigId: string) {
  return useCalibrationChange(rigId, async ({ channel, content, certificate }: NewCalibration) => {
    const params = { path: { rigId } };
    const body = { channel, content };
    const made = await answerOf(client.POST('/api/v1/rigs/{rigId}/calibrations', { params, body }));
    if (certificate) await putCertificate(made.id, certificate);
  });
}

export function useWithdraw(rigId: string) {
  return useCalibrationChange(rigId, ({ id, reason }: { id: string; reason: string }) =>
    answerOf(
      client.POST('/api/v1/calibrations/{id}/withdraw', { params: { path: { id } }, body: { reason } }),
    ),
  );
}

export function useUpload(rigId: string) {
  return useCalibrationChange(rigId, ({ id, file }: { id: string; file: File }) => putCertificate(id, file));
}

/** The file goes as it is; its type is its Content-Type. */
async function putCertificate(id: string, file: File): Promise<void> {
  const params = { path: { id } };
  const headers = { 'Content-Type': file.type || 'application/octet-stream' };
  const bodySerializer = () => file;
  await answerOf(
    client.PUT('/api/v1/calibrations/{id}/certificate', { params, body: '', headers, bodySerializer }),
  );
}

export function certificateAddress(id: string): string {
  return `/api/v1/calibrations/${encodeURIComponent(id)}/certificate`;
}
