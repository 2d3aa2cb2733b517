/** What waits are made with: the real clock, or a fake one in tests. */
export interface TimerPort {
  /** Runs `task` once after the delay; the answer cancels it. */
  after(delayMs: number, task: () => void): () => void;
}

export const systemTimers: TimerPort = {
  after(delayMs, task) {
    const timer = setTimeout(task, delayMs);
    return () => {
      clearTimeout(timer);
    };
  },
};
