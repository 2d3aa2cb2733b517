import { DomainError } from '@cresthold/shared';

/** `request.too-many`, with the time after which a new attempt makes sense. */
export class RetryLaterError extends DomainError {
  /** @param retryAfterS whole seconds, at least 1 */
  constructor(readonly retryAfterS: number) {
    super('request.too-many', `Too many attempts: try again in ${retryAfterS} s.`);
  }
}
