export interface UnitTiming {
  /** Longest wait for an answer of any unit that is not named in `units`. */
  unitTimeoutMs: number;
  /** Units with a timeout of their own. */
  units: readonly { unit: number; timeoutMs: number }[];
  /** Longest time for which a silent unit is left alone. */
  mostBackOffMs: number;
}

interface Silence {
  /** Requests in a row without an answer. */
  count: number;
  retryAtMs: number;
}

/** A silent unit is left alone for so many times its timeout, so that it costs at most a twentieth of the time. */
const restPerTimeout = 20;

/**
 * Which units of one line answer, and when a silent one is asked again: at once after the first silence, which
 * may be chance; after that when 20 of its timeouts have passed, then 40, 80 …, up to `mostBackOffMs`.
 *
 * @source chosen here; the doubling is the usual exponential back-off
 */
export class UnitWatch {
  private readonly timeouts: ReadonlyMap<number, number>;
  private readonly silent = new Map<number, Silence>();

  constructor(private readonly timing: UnitTiming) {
    this.timeouts = new Map(timing.units.map(({ unit, timeoutMs }) => [unit, timeoutMs]));
  }

  /** Longest wait for an answer of this unit. */
  timeoutMs(unit: number): number {
    return this.timeouts.get(unit) ?? this.timing.unitTimeoutMs;
  }

  answered(unit: number): void {
    if (this.silent.size > 0) this.silent.delete(unit);
  }

  wasSilent(unit: number, nowMs: number): void {
    const count = (this.silent.get(unit)?.count ?? 0) + 1;
    const rests = count < 2 ? 0 : restPerTimeout * 2 ** (count - 2);
    const backOffMs = Math.min(this.timeoutMs(unit) * rests, this.timing.mostBackOffMs);
    this.silent.set(unit, { count, retryAtMs: nowMs + backOffMs });
  }

  isSilent(unit: number): boolean {
    return this.silent.has(unit);
  }

  /** Requests in a row that the unit left without an answer. */
  silences(unit: number): number {
    return this.silent.get(unit)?.count ?? 0;
  }

  /** Time until a silent unit may be asked again; 0 where it may be asked now. */
  restMs(unit: number, nowMs: number): number {
    return Math.max(0, (this.silent.get(unit)?.retryAtMs ?? 0) - nowMs);
  }
}
