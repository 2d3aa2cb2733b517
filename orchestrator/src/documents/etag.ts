import { createParamDecorator, type ExecutionContext } from '@nestjs/common';
import { ApiHeader } from '@nestjs/swagger';
import { DomainError } from '@cresthold/shared';
import type { Request, Response } from 'express';

/** Marks an answer with the revision of the document in it. */
export function setEtag(response: Response, revision: number): void {
  response.setHeader('ETag', `"${revision}"`);
}

/**
 * Revision in an If-Match header.
 *
 * @throws request.invalid where it is none of our tags
 */
export function revisionOf(ifMatch: string): number {
  const match = /^"(\d{1,9})"$/.exec(ifMatch.trim());
  if (match === null) {
    throw new DomainError('request.invalid', undefined, [
      { field: 'If-Match', message: 'Give the ETag of the document as you last read it, e.g. "3".' },
    ]);
  }
  return Number(match[1]);
}

/** The revision that a change is based on, in a controller's method. */
export const IfMatch = createParamDecorator((_: unknown, context: ExecutionContext): number =>
  revisionOf(context.switchToHttp().getRequest<Request>().headers['if-match'] ?? ''),
);

/** As `IfMatch`, null where the header is not sent. */
export const OptionalIfMatch = createParamDecorator(
  (_: unknown, context: ExecutionContext): number | null => {
    const header = context.switchToHttp().getRequest<Request>().headers['if-match'];
    return header === undefined ? null : revisionOf(header);
  },
);

/** Describes the If-Match header of a route. */
export function ApiIfMatch(required = true): MethodDecorator {
  return ApiHeader({ name: 'If-Match', required, description: 'ETag of the document as it was last read.' });
}

/** @throws request.precondition where the document has changed since `expected` */
export function requireRevision(actual: number, expected: number | null): void {
  if (expected !== null && expected !== actual) throw new DomainError('request.precondition');
}
