import type { ErrorCode, FieldFault } from '@cresthold/shared';

/** A failure of the API as the screens know it: told apart by `code`, never by text or class of the cause. */
export class ApiProblem extends Error {
  constructor(
    /** HTTP status; 0 where no answer came. */
    readonly status: number,
    /** Code of the error catalogue, or `network` where the server did not answer. */
    readonly code: ErrorCode | 'network',
    message: string,
    readonly fields: readonly FieldFault[] = [],
  ) {
    super(message);
    this.name = 'ApiProblem';
  }

  /** The fault of one field, looked up with and without the `content.` that documents are wrapped in. */
  fieldMessage(field: string): string | undefined {
    return this.fields.find((fault) => fault.field === field || fault.field === `content.${field}`)?.message;
  }
}

interface ProblemDetails {
  title?: string;
  detail?: string;
  code?: string;
  errors?: FieldFault[];
}

/** Reads problem details (RFC 9457); what is none becomes a plain text with the status. */
export function problemFrom(status: number, body: unknown): ApiProblem {
  const details: ProblemDetails = typeof body === 'object' && body !== null ? body : {};
  const text = details.detail ?? details.title ?? `The server answered ${status} without saying why.`;
  const fields = Array.isArray(details.errors) ? details.errors : [];
  return new ApiProblem(status, (details.code as ErrorCode | undefined) ?? 'server.bug', text, fields);
}

const noAnswer = 'The server does not answer: check that it runs and that the network is up.';

export function networkProblem(message = noAnswer): ApiProblem {
  return new ApiProblem(0, 'network', message);
}

export function asProblem(error: unknown): ApiProblem {
  if (error instanceof ApiProblem) return error;
  return new ApiProblem(0, 'server.bug', 'The console met a fault of its own: load the page again.');
}
