import type { Envelope } from './dto/envelope.dto.js';
import type { EnvelopeEntity } from './entities/envelope.entity.js';

export function toEnvelope(row: EnvelopeEntity): Envelope {
  const { id, rigId, version, status, revision, author, submittedBy, decidedBy, reason } = row;
  const { createdAt, decidedAt, content } = row;
  return {
    id,
    rigId,
    version,
    status,
    revision,
    author,
    submittedBy,
    decidedBy,
    reason,
    createdAt,
    decidedAt,
    content,
  };
}
