import { DomainError, type WireFault } from '@cresthold/shared';

/** What one address of a read or probe brought. */
export interface Catch {
  value: number;
  trace: Float64Array | null;
  fault: DomainError | null;
}

/** The same address at the last read that the device answered well; null before the first. */
export type Held = Catch | null;

const nothing = (fault: DomainError): Catch => ({ value: NaN, trace: null, fault });

/** The error that a fault makes of a call to the device; null where the call succeeds or only takes longer. */
export function faultOfCall(fault: WireFault): DomainError | null {
  switch (fault.kind) {
    case 'drop':
      return new DomainError(
        'adapter.timeout',
        `Injected fault: the answer was dropped (${fault.timeoutMs} ms).`,
      );
    case 'truncate':
      return new DomainError('adapter.corrupt', 'Injected fault: the answer breaks off.');
    case 'corrupt':
      return new DomainError('adapter.corrupt', 'Injected fault: the answer is corrupt.');
    case 'wrong-unit':
      return new DomainError('adapter.corrupt', `Injected fault: unit ${fault.answeringUnit} answered.`);
    case 'exception':
      return new DomainError('adapter.refused', `Injected fault: ${fault.text}.`);
    default:
      return null;
  }
}

/** How many of `count` values an answer still holds. */
export function intactCount(fault: WireFault, count: number): number {
  return fault.kind === 'truncate' ? Math.floor(fault.keptShare * count) : 0;
}

/** What comes through of one value that the fault hits. */
export function damagedCatch(fault: WireFault, caught: Catch, held: Held): Catch {
  const error = faultOfCall(fault);
  if (error) return nothing(error);
  if (fault.kind === 'freeze') return held ?? caught;
  if (fault.kind !== 'wrong-scale' || caught.fault) return caught;
  const shown = (value: number): number => fault.factor * value + fault.offset;
  return { value: shown(caught.value), trace: caught.trace?.map(shown) ?? null, fault: null };
}

/** What a write looks like that the fault hits: what is sent, if anything, and what is answered. */
export interface DamagedWrite {
  /** Null where nothing reaches the device. */
  sent: number | null;
  /** What is answered in place of the device's own answer; undefined where that comes through. */
  answer?: DomainError | null;
}

export function damagedWrite(fault: WireFault, value: number): DamagedWrite {
  switch (fault.kind) {
    case 'drop':
    case 'wrong-unit':
    case 'exception':
      return { sent: null, answer: faultOfCall(fault) };
    case 'freeze':
      return { sent: null, answer: null };
    case 'truncate':
    case 'corrupt':
      return { sent: value, answer: faultOfCall(fault) };
    case 'wrong-scale':
      return { sent: (value - fault.offset) / fault.factor };
    default:
      return { sent: value };
  }
}
