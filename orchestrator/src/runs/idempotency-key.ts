import { createParamDecorator, type ExecutionContext } from '@nestjs/common';
import { DomainError } from '@cresthold/shared';
import type { Request } from 'express';
import { idempotencyKeySchema } from './dto/run.dto.js';

/** The Idempotency-Key header of a request, null where none is sent. */
export const IdempotencyKey = createParamDecorator((_: unknown, context: ExecutionContext): string | null => {
  const header = context.switchToHttp().getRequest<Request>().header('idempotency-key');
  if (header === undefined) return null;
  const parsed = idempotencyKeySchema.safeParse(header);
  if (parsed.success) return parsed.data;
  const message = parsed.error.issues[0]?.message ?? '';
  throw new DomainError('request.invalid', undefined, [{ field: 'Idempotency-Key', message }]);
});
