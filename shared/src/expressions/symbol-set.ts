import type { TraceAxis } from '../rigs/rig.schema.js';

/** Names that an expression may use, and which of them are traces. */
export class SymbolSet extends Set<string> {
  constructor(
    names: Iterable<string>,
    /** Axes of the names that are traces; all others are numbers. */
    readonly traces: ReadonlyMap<string, TraceAxis>,
  ) {
    super(names);
  }

  /** The same and some more numbers. */
  with(names: Iterable<string>): SymbolSet {
    return new SymbolSet([...this, ...names], this.traces);
  }
}

const noTraces: ReadonlyMap<string, TraceAxis> = new Map();

/** The traces among names; a plain set of names has numbers only. */
export function tracesAmong(symbols: ReadonlySet<string>): ReadonlyMap<string, TraceAxis> {
  return symbols instanceof SymbolSet ? symbols.traces : noTraces;
}
