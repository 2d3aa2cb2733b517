import { DomainError } from '@cresthold/shared';
import type { ProofTestSignature } from './dto/proof-test.dto.js';
import type { ProofTestEntity } from './entities/proof-test.entity.js';

/**
 * What a signature needs: a pass rests on a measured response; one that was too slow or wrote nothing, and every
 * failure, on a note as well.
 *
 * @throws proof-test.not-open, proof-test.no-response, request.invalid
 */
export function requireSignable(test: ProofTestEntity, { outcome, note }: ProofTestSignature): void {
  if (test.status !== 'open') throw new DomainError('proof-test.not-open');
  if (outcome === 'pass' && test.responseMs === null) throw new DomainError('proof-test.no-response');
  const why = outcome === 'fail' ? 'Say what went wrong.' : whyNoteIsNeeded(test);
  if (why === null || note !== '') return;
  throw new DomainError('request.invalid', undefined, [{ field: 'note', message: why }]);
}

function whyNoteIsNeeded({ responseMs, limitMs, writes, definition }: ProofTestEntity): string | null {
  if ((responseMs ?? 0) > limitMs) return 'It answered later than expected: say why it passes all the same.';
  const isStopping = definition.action === 'stop' || definition.action === 'trip';
  if (isStopping && writes === 0) return 'No actuator was written: say why it passes all the same.';
  return null;
}
