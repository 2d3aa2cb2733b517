import { StandardSchemaValidationPipe, type ArgumentMetadata } from '@nestjs/common';
import { DomainError, type FieldFault } from '@cresthold/shared';

type PathSegment = PropertyKey | { key: PropertyKey };

interface Issue {
  message: string;
  path?: readonly PathSegment[];
}

/** Checks what a route takes against the schema that its parameter names; faults name their field. */
export class RequestValidationPipe extends StandardSchemaValidationPipe {
  constructor() {
    super({
      exceptionFactory: (issues) => new DomainError('request.invalid', undefined, issues.map(toFieldFault)),
    });
  }

  override async transform<T = unknown>(value: T, metadata: ArgumentMetadata): Promise<T> {
    try {
      return await super.transform<T>(value, metadata);
    } catch (error) {
      // No body at all where one is needed: naming its fields would hide what is wrong.
      if (metadata.type === 'body' && value === undefined) throw new DomainError('request.media-type');
      throw error;
    }
  }
}

export function toFieldFault(issue: Issue): FieldFault {
  return { field: fieldPath(issue.path ?? []), message: issue.message };
}

/**
 * The path of a field as people write it.
 *
 * @example
 * fieldPath(['limits', 0, 'max']) // 'limits[0].max'
 */
export function fieldPath(path: readonly PathSegment[]): string {
  return path.reduce<string>((text, segment) => {
    const key = typeof segment === 'object' ? segment.key : segment;
    if (typeof key === 'number') return `${text}[${key}]`;
    return text === '' ? String(key) : `${text}.${String(key)}`;
  }, '');
}
