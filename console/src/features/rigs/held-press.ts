/** Time between two renewals, ms: several go into the time of the hold, so that a slow one does no harm. */
export const renewEveryMs = 250;

export interface HeldPressParts {
  /** Begins the move or renews it; rejects where it is refused or not answered in time. */
  hold: (holdId: string) => Promise<unknown>;
  /** Says that the press is over; nobody waits for it. */
  release: (holdId: string) => void;
  /** Told once: the error that ended it, or null where it was let go. */
  onEnd: (error: unknown) => void;
}

/** One press of a hold-to-move control, from its beginning to its end; a new press is a new one. */
export class HeldPress {
  private readonly id = newHoldId();
  private readonly timer: ReturnType<typeof setInterval>;
  private isOver = false;
  private isUnderWay = false;

  constructor(private readonly parts: HeldPressParts) {
    this.timer = setInterval(() => this.renew(), renewEveryMs);
    this.renew();
  }

  /** Lets go; a second time it does nothing. */
  end(error: unknown = null): void {
    if (this.isOver) return;
    this.isOver = true;
    clearInterval(this.timer);
    this.parts.release(this.id);
    this.parts.onEnd(error);
  }

  /** One at a time: renewals that pile up behind a slow line would hold a rig that nobody holds. */
  private renew(): void {
    if (this.isUnderWay) return;
    this.isUnderWay = true;
    this.parts.hold(this.id).then(
      () => (this.isUnderWay = false),
      (error: unknown) => this.end(error),
    );
  }
}

/** Random; `crypto.randomUUID` is there on pages with HTTPS only. */
function newHoldId(): string {
  const words = crypto.getRandomValues(new Uint32Array(4));
  return [...words].map((word) => word.toString(16).padStart(8, '0')).join('');
}
