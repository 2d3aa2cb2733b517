/** What a faulty wire does with the calls that go through it. */
export type WireFault =
  | { kind: 'none' }
  /** Every call takes this much longer. */
  | { kind: 'delay'; delayMs: number }
  /** No answer: adapter.timeout after the given time. Writes do not reach the device. */
  | { kind: 'drop'; timeoutMs: number }
  /** No valid answer: adapter.corrupt. Writes do reach the device. */
  | { kind: 'corrupt' }
  /** The device answers, but with the values of its last good read; writes are accepted and do nothing. */
  | { kind: 'freeze' };

/** Sets, at any time, how the sessions opened through `withFaults` misbehave. */
export class FaultControl {
  fault: WireFault = { kind: 'none' };
  private generation = 0;

  /** Ends the open sessions as a broken wire would; new ones are welcome. */
  disconnect(): void {
    this.generation += 1;
  }

  /** What a session remembers to see that it was ended. */
  get sessionGeneration(): number {
    return this.generation;
  }
}
