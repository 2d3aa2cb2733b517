import { errorCodes, type ErrorCode, type ErrorRecord } from '@cresthold/shared';
import { z } from 'zod';
import { statusOfKind } from './error-kind-tables.js';

/** The body of every error, RFC 9457. */
export const problemDetailsSchema = z
  .object({
    /** Where the error is explained. */
    type: z.string(),
    title: z.string(),
    status: z.int(),
    /** What is wrong and what to do. */
    detail: z.string(),
    code: z.enum(errorCodes as [ErrorCode, ...ErrorCode[]]),
    errors: z.array(z.object({ field: z.string(), message: z.string() })),
  })
  .meta({ id: 'ProblemDetails' });

export type ProblemDetails = z.infer<typeof problemDetailsSchema>;

export const problemMediaType = 'application/problem+json';

const titles: Record<number, string> = {
  400: 'Bad request',
  401: 'Not signed in',
  403: 'Forbidden',
  404: 'Not found',
  409: 'Not possible now',
  429: 'Too many requests',
  500: 'Fault of the server',
  502: 'Fault of the device',
  503: 'Unavailable',
  504: 'Timed out',
};

/** The HTTP form of an error. */
export function toProblemDetails(error: ErrorRecord): ProblemDetails {
  const status = statusOfKind[error.kind];
  return {
    type: `urn:cresthold:error:${error.code}`,
    title: titles[status] ?? 'Error',
    status,
    detail: error.message,
    code: error.code,
    errors: error.details,
  };
}
