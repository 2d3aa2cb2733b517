import { DomainError } from '@cresthold/shared';
import { z } from 'zod';

const defaultLimit = 50;

/** `?limit=&cursor=` of every list. */
export const pageQuerySchema = z.object({
  limit: z.coerce.number().int().min(1).max(200).default(defaultLimit),
  /** `nextCursor` of the page before; empty for the first. */
  cursor: z.string().max(500).optional(),
});
export type PageQuery = z.infer<typeof pageQuerySchema>;

export interface Page<T> {
  items: T[];
  /** Null on the last page. */
  nextCursor: string | null;
}

/** Schema of one page of a list. */
export function pageSchema<T extends z.ZodType>(item: T) {
  return z.object({ items: z.array(item), nextCursor: z.string().nullable() });
}

/**
 * Cuts a page out of rows that were read with one more than `limit`. The cursor names the last row's key,
 * so that rows added or taken meanwhile neither repeat nor hide others.
 */
export function toPage<Row, T>(
  rows: readonly Row[],
  limit: number,
  keyOf: (row: Row) => string,
  map: (row: Row) => T,
): Page<T> {
  const shown = rows.slice(0, limit);
  const last = shown.at(-1);
  const hasMore = rows.length > limit && last !== undefined;
  return { items: shown.map(map), nextCursor: hasMore ? encodeCursor(keyOf(last)) : null };
}

function encodeCursor(key: string): string {
  return Buffer.from(`after:${key}`).toString('base64url');
}

/**
 * The key after which a page begins; null for the first page.
 *
 * @throws request.invalid where the cursor is none of ours
 */
export function afterKey({ cursor }: PageQuery): string | null {
  if (cursor === undefined || cursor === '') return null;
  const text = Buffer.from(cursor, 'base64url').toString();
  if (!text.startsWith('after:')) {
    throw new DomainError('request.invalid', undefined, [
      { field: 'cursor', message: 'This is no cursor of this server: use "nextCursor" of the page before.' },
    ]);
  }
  return text.slice('after:'.length);
}
