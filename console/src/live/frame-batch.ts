type Listener = () => void;

/** Runs a callback in the next animation frame; replaced in tests. */
export type RequestFrame = (callback: () => void) => void;

/** Tells listeners that something changed, at most once per animation frame however often it changes. */
export class FrameBatch {
  private readonly listeners = new Set<Listener>();
  private isScheduled = false;

  constructor(private readonly requestFrame: RequestFrame) {}

  readonly subscribe = (listener: Listener): (() => void) => {
    this.listeners.add(listener);
    return () => this.listeners.delete(listener);
  };

  changed(): void {
    if (this.isScheduled) return;
    this.isScheduled = true;
    this.requestFrame(() => {
      this.isScheduled = false;
      for (const listener of [...this.listeners]) listener();
    });
  }
}
