import type { ProofTest } from './dto/proof-test.dto.js';
import type { ProofTestEntity } from './entities/proof-test.entity.js';

export function toProofTest(row: ProofTestEntity): ProofTest {
  const { id, rigId, envelopeVersion, interlock, method, status, startedBy, startedAt, limitMs } = row;
  const { conditionAt, responseMs, writes, outcome, note, signedBy, signedAt } = row;
  const { title, action } = row.definition;
  return {
    ...{
      id,
      rigId,
      envelopeVersion,
      interlock,
      title,
      action,
      method,
      status,
      startedBy,
      startedAt,
      limitMs,
    },
    ...{ conditionAt, responseMs, writes, outcome, note, signedBy, signedAt },
  };
}
