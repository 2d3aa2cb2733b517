import type { Rig } from '../rigs/rig.schema.js';
import { SymbolSet } from './symbol-set.js';

/** Names of every channel of a rig: what an expression over readings may use. */
export function channelSymbols({ channels }: Rig): SymbolSet {
  const ids = channels.map(({ id }) => id);
  return new SymbolSet(ids, new Map(channels.flatMap((c) => (c.kind === 'trace' ? [[c.id, c.axis]] : []))));
}
