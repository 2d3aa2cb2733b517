import { errorCatalogue, type ErrorCode, type ErrorKind } from './error-catalogue.js';

/** One fault of one input: where it is and what to do about it. */
export interface FieldFault {
  /** Path of the field or step at fault, e.g. `limits[0].max` or `steps.seek1.ditherAmplitude`. */
  field: string;
  message: string;
}

/** An error as plain data: what crosses a process boundary or HTTP; known by `code`, never by class. */
export interface ErrorRecord {
  code: ErrorCode;
  kind: ErrorKind;
  message: string;
  details: FieldFault[];
}

/**
 * An expected failure with a stable code from the catalogue.
 *
 * @example
 * throw new DomainError('rig.busy', 'Rig "burner" runs run 12 until it ends or is stopped.');
 */
export class DomainError extends Error {
  readonly kind: ErrorKind;

  constructor(
    readonly code: ErrorCode,
    message?: string,
    readonly details: FieldFault[] = [],
    options?: ErrorOptions,
  ) {
    super(message ?? errorCatalogue[code].message, options);
    this.name = 'DomainError';
    this.kind = errorCatalogue[code].kind;
  }

  toRecord(): ErrorRecord {
    return { code: this.code, kind: this.kind, message: this.message, details: this.details };
  }

  static fromRecord(record: ErrorRecord): DomainError {
    return new DomainError(record.code, record.message, record.details);
  }
}

/** The plain data of any thrown value; what is no DomainError is a bug and its text stays inside. */
export function toErrorRecord(error: unknown): ErrorRecord {
  if (error instanceof DomainError) return error.toRecord();
  return { code: 'server.bug', kind: 'bug', message: errorCatalogue['server.bug'].message, details: [] };
}
