import { HttpException } from '@nestjs/common';
import { DomainError, type ErrorCode, type FieldFault } from '@cresthold/shared';

const codeOfStatus: Record<number, ErrorCode> = {
  400: 'request.invalid',
  401: 'auth.required',
  403: 'auth.forbidden',
  404: 'request.not-found',
  413: 'request.too-large',
  415: 'request.media-type',
  429: 'request.too-many',
  503: 'server.unhealthy',
};

/**
 * What the framework or its body parser threw, as an error of the catalogue; null where it is neither and
 * so a bug.
 */
export function toDomainError(error: unknown): DomainError | null {
  if (error instanceof DomainError) return error;
  if (error instanceof HttpException) return fromHttpException(error);
  return fromBodyParser(error);
}

function fromHttpException(error: HttpException): DomainError | null {
  const code = codeOfStatus[error.getStatus()];
  return code === undefined
    ? null
    : new DomainError(code, undefined, healthFaults(error.getResponse()), { cause: error });
}

/** The parts that do not work, where a health check failed. */
function healthFaults(response: unknown): FieldFault[] {
  if (typeof response !== 'object' || response === null || !('error' in response)) return [];
  const parts = response.error;
  if (typeof parts !== 'object' || parts === null) return [];
  return Object.entries(parts as Record<string, { message?: unknown }>).map(([field, part]) => ({
    field,
    message: typeof part.message === 'string' ? part.message : 'does not work',
  }));
}

/** Express's body parser tells its errors apart by `type`. */
function fromBodyParser(error: unknown): DomainError | null {
  if (!(error instanceof Error) || !('type' in error)) return null;
  switch (error.type) {
    case 'entity.parse.failed':
      return new DomainError('request.invalid', 'The body is no valid JSON.', [
        { field: '', message: error.message },
      ]);
    case 'entity.too.large':
      return new DomainError('request.too-large');
    case 'charset.unsupported':
    case 'encoding.unsupported':
      return new DomainError('request.media-type');
    default:
      return null;
  }
}
