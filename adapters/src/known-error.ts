import { DomainError, type ErrorCode, errorCatalogue } from '@cresthold/shared';

/**
 * An error of the catalogue, known by its code: a plug-in may have been installed with a copy of the class of its
 * own. Null for everything else, which is a bug.
 */
export function asDomainError(thrown: unknown): DomainError | null {
  if (thrown instanceof DomainError) return thrown;
  if (!(thrown instanceof Error) || !('code' in thrown) || typeof thrown.code !== 'string') return null;
  if (!Object.hasOwn(errorCatalogue, thrown.code)) return null;
  return new DomainError(thrown.code as ErrorCode, thrown.message, [], { cause: thrown });
}
