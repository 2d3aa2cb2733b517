import { useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import type { EnvelopeContent } from '@cresthold/shared';
import { answerOf, client, type ProofTest, type ProofTestDue } from '../../../api/index.js';
import { useLiveHub } from '../../../live/index.js';

const proofTestKeys = {
  ofRig: (rigId: string) => ['proof-tests', rigId] as const,
  dues: (rigId: string) => ['proof-tests', rigId, 'due'] as const,
  list: (rigId: string) => ['proof-tests', rigId, 'list'] as const,
  one: (rigId: string, testId: string) => ['proof-tests', rigId, testId] as const,
};

const shownTests = 20;
/** Between two looks at whether the interlock has acted, ms. */
const pollMs = 400;
const duesAgainMs = 60_000;
const at = (rigId: string) => ({ params: { path: { rigId } } });

/** When the interlocks of a rig have to be tested; asked only where its envelope in force asks for tests at all. */
export function useProofTestDues(rigId: string, inForce: EnvelopeContent | undefined) {
  return useQuery({
    queryKey: proofTestKeys.dues(rigId),
    enabled: inForce?.interlocks.some(({ proofTestEveryDays }) => proofTestEveryDays !== null) ?? false,
    refetchInterval: duesAgainMs,
    queryFn: (): Promise<ProofTestDue[]> =>
      answerOf(client.GET('/api/v1/rigs/{rigId}/proof-tests/due', at(rigId))),
  });
}

/** The last proof tests of a rig, newest first. */
export function useProofTests(rigId: string, isAsked: boolean) {
  return useQuery({
    queryKey: proofTestKeys.list(rigId),
    enabled: isAsked,
    queryFn: async (): Promise<ProofTest[]> => {
      const params = { path: { rigId }, query: { limit: shownTests } };
      return (await answerOf(client.GET('/api/v1/rigs/{rigId}/proof-tests', { params }))).items;
    },
  });
}

/** One test as it goes on: looked at again until the interlock has acted. */
export function useProofTest(rigId: string, begun: ProofTest | undefined) {
  const testId = begun?.id ?? '';
  return useQuery({
    queryKey: proofTestKeys.one(rigId, testId),
    enabled: begun !== undefined,
    refetchInterval: ({ state }) => {
      const test = state.data;
      return test === undefined || (test.status === 'open' && test.responseMs === null) ? pollMs : false;
    },
    queryFn: (): Promise<ProofTest> => {
      const params = { path: { rigId, testId } };
      return answerOf(client.GET('/api/v1/rigs/{rigId}/proof-tests/{testId}', { params }));
    },
  });
}

export function useStartProofTest(rigId: string) {
  return useMutation({
    mutationFn: (body: { interlock: string; method: ProofTest['method'] }): Promise<ProofTest> =>
      answerOf(client.POST('/api/v1/rigs/{rigId}/proof-tests', { ...at(rigId), body })),
  });
}

interface Signature {
  testId: string;
  outcome: 'pass' | 'fail';
  note: string;
}

export function useSignProofTest(rigId: string) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: ({ testId, ...body }: Signature): Promise<ProofTest> => {
      const params = { path: { rigId, testId } };
      return answerOf(client.POST('/api/v1/rigs/{rigId}/proof-tests/{testId}/sign', { params, body }));
    },
    onSuccess: () => queryClient.invalidateQueries({ queryKey: proofTestKeys.ofRig(rigId) }),
  });
}

/** Arms a rig whose proof tests are overdue, for these only. */
export function useArmForProofTests(rigId: string) {
  const { statuses } = useLiveHub();
  return useMutation({
    mutationFn: () => answerOf(client.POST('/api/v1/rigs/{rigId}/proof-tests/arm', at(rigId))),
    onSuccess: (status) => statuses.take(status),
  });
}
