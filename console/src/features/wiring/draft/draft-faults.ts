import type { FieldFault } from '@cresthold/shared';
import { needed } from './rig-draft.js';

/** Faults of a draft by field: what its own texts say goes before what the server found. */
export interface DraftFaults {
  at: (field: string) => string | undefined;
  /** All below a field, with the rest of their path. */
  below: (field: string) => FieldFault[];
  /** Those that are shown. */
  count: number;
}

/**
 * @param isTried whether saving was tried: until then nobody is told that something is still missing
 */
export function joinFaults(
  own: ReadonlyMap<string, string>,
  found: readonly FieldFault[],
  isTried: boolean,
): DraftFaults {
  const all = new Map<string, string>();
  for (const { field, message } of found) if (!all.has(field)) all.set(field, message);
  for (const [field, message] of own) all.set(field, message);
  if (!isTried) {
    for (const [field, message] of own) if (message === needed) all.delete(field);
  }
  return {
    at: (field) => all.get(field),
    below: (field) =>
      [...all].flatMap(([path, message]) =>
        path.startsWith(field) ? [{ field: path.slice(field.length).replace(/^\./, ''), message }] : [],
      ),
    count: all.size,
  };
}

/**
 * Faults of one row by column; what stands in no column of the row is put to its id.
 *
 * @param keys columns in which the row has a cell
 */
export function rowFaults(
  faults: DraftFaults,
  index: number,
  keys: ReadonlySet<string>,
): Map<string, string> {
  const byColumn = new Map<string, string>();
  for (const { field, message } of faults.below(`channels[${index}]`)) {
    const key = keys.has(field)
      ? field
      : [...keys].find((one) => one.startsWith(`${field}.`) && field !== 'address');
    const place = key ?? 'id';
    const before = byColumn.get(place);
    byColumn.set(place, before === undefined ? message : `${before} ${message}`);
  }
  return byColumn;
}
