import { DomainError, type FieldFault } from '@cresthold/shared';

/** Faults of a document as faults of the request that carried it. */
export function prefixFaults(faults: readonly FieldFault[], prefix: string): FieldFault[] {
  return faults.map(({ field, message }) => ({
    field: [prefix, field].filter((part) => part !== '').join('.'),
    message,
  }));
}

/**
 * Runs a check that throws, and returns its faults instead.
 *
 * @throws whatever is no DomainError
 */
export function faultsOf(check: () => unknown, fallbackField: string): FieldFault[] {
  try {
    check();
    return [];
  } catch (error) {
    if (!(error instanceof DomainError)) throw error;
    return error.details.length > 0 ? error.details : [{ field: fallbackField, message: error.message }];
  }
}

/** @throws request.invalid where there are faults */
export function refuseFaults(faults: readonly FieldFault[]): void {
  if (faults.length > 0) throw new DomainError('request.invalid', undefined, [...faults]);
}
