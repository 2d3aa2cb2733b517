import { DomainError, type FieldFault } from '@cresthold/shared';
import type { z } from 'zod';

/** Path of a zod issue as screens name it: `limits[0].max`. */
export function fieldPath(path: readonly PropertyKey[], root = ''): string {
  return path.reduce<string>((text, part) => {
    if (typeof part === 'number') return `${text}[${part}]`;
    return text === '' ? String(part) : `${text}.${String(part)}`;
  }, root);
}

/** The faults that the schema finds in a value, named by field. */
export function fieldFaultsOf(schema: z.ZodType, value: unknown, root = ''): FieldFault[] {
  const result = schema.safeParse(value);
  return result.success ? [] : faultsOfIssues(result.error.issues, root);
}

function faultsOfIssues(issues: readonly z.core.$ZodIssue[], root: string): FieldFault[] {
  return issues.map((issue) => ({ field: fieldPath(issue.path, root), message: issue.message }));
}

/**
 * The parsed value.
 *
 * @throws adapter.misconfigured with one detail per field at fault
 */
export function parseOrMisconfigured<T>(schema: z.ZodType<T>, value: unknown, root = ''): T {
  const result = schema.safeParse(value);
  if (result.success) return result.data;
  const details = faultsOfIssues(result.error.issues, root);
  const text = details.map(({ field, message }) => `${field === '' ? 'value' : field}: ${message}`).join(' ');
  throw new DomainError('adapter.misconfigured', text, details);
}
