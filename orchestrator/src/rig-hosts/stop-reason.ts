import { createParamDecorator, type ExecutionContext } from '@nestjs/common';
import type { Request } from 'express';
import { stopReasonLengthMax } from './dto/rig-commands.dto.js';

/**
 * The reason in the body of an emergency stop, or what stands for none. Nothing about a body may keep an
 * emergency stop from being carried out, so this refuses nothing.
 *
 * @example
 * stopReason({ reason: ' Smoke. ' }) // 'Smoke.'
 * stopReason(undefined) // 'Emergency stop pressed.'
 */
export function stopReason(body: unknown): string {
  const reason = typeof body === 'object' && body !== null && 'reason' in body ? body.reason : null;
  const text = typeof reason === 'string' ? reason.trim().slice(0, stopReasonLengthMax) : '';
  return text || 'Emergency stop pressed.';
}

export const StopReason = createParamDecorator((_: unknown, context: ExecutionContext): string =>
  stopReason(context.switchToHttp().getRequest<Request>().body),
);
