import type { Readings } from '../scan/readings.js';
import type { EmergencyStopInput } from './envelope.schema.js';

/** Looks once a scan whether a hard-wired emergency stop is pressed, as far as its sensor tells. */
export class EmergencyStopInputs {
  private readonly indexes: readonly number[];

  constructor(
    private readonly inputs: readonly EmergencyStopInput[],
    private readonly readings: Readings,
  ) {
    this.indexes = inputs.map(({ channel }) => readings.indexOf(channel));
  }

  /** Whether any input is not released: reads pressed, or is not known. @realtime safe: allocates nothing */
  get isAnyNotReleased(): boolean {
    for (let i = 0; i < this.inputs.length; i += 1) if (this.isNotReleased(i)) return true;
    return false;
  }

  /** Calls back for each input that reads pressed, and for each that is not known, in the envelope's order. */
  forEachNotReleased(visit: (input: EmergencyStopInput, isKnown: boolean) => void): void {
    for (let i = 0; i < this.inputs.length; i += 1) {
      const input = this.inputs[i];
      if (!input) continue;
      if (this.isNotReleased(i)) visit(input, this.readings.isGood(this.indexes[i] ?? -1));
    }
  }

  /** An input that is not known counts as pressed. */
  isPressed(channel: string): boolean {
    let isFound = false;
    this.forEachNotReleased((input) => {
      if (input.channel === channel) isFound = true;
    });
    return isFound;
  }

  private isNotReleased(i: number): boolean {
    const value = this.readings.goodValue(this.indexes[i] ?? -1);
    return Number.isNaN(value) || (value === 0) === (this.inputs[i]?.pressedWhen === 'zero');
  }
}
