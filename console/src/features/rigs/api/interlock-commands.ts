import { answerOf, client } from '../../../api/index.js';
import { useRigCommand } from './rig-commands.js';

const at = (rigId: string, interlock: string) => ({ params: { path: { rigId, interlock } } });

interface Bypass {
  interlock: string;
  forS: number;
  reason: string;
}

export function useBypass(rigId: string) {
  return useRigCommand(({ interlock, ...body }: Bypass) =>
    answerOf(
      client.POST('/api/v1/rigs/{rigId}/interlocks/{interlock}/bypass', { ...at(rigId, interlock), body }),
    ),
  );
}

export function useEndBypass(rigId: string) {
  return useRigCommand((interlock: string) =>
    answerOf(client.DELETE('/api/v1/rigs/{rigId}/interlocks/{interlock}/bypass', at(rigId, interlock))),
  );
}

export function useAcknowledge(rigId: string) {
  return useRigCommand((interlock: string) =>
    answerOf(client.POST('/api/v1/rigs/{rigId}/interlocks/{interlock}/acknowledge', at(rigId, interlock))),
  );
}
