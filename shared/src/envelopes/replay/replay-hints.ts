import type { RunStatus } from '../../runs/run-event.schema.js';
import type { Halt, ReplayHint } from './replay-report.schema.js';

/** How the run really ended, as far as an envelope could have had to do with it. */
export interface RecordedEnd {
  /** Null while the run goes on, or where its file does not say. */
  status: RunStatus | null;
  /** The first trip in the record. */
  trip: { cause: string; tS: number } | null;
}

/** Causes that an envelope decides about; the others come whatever it says. */
const enveloped = ['interlock:', 'stale:', 'read-back:', 'emergency-stop-input:', 'overrun'];

/** Later than the record by less than this is the same, s. */
const lateS = 1e-6;

/** What a safety officer should look at twice: a nuisance trip, a missing one, one that comes later. */
export function replayHints(end: RecordedEnd, halt: Halt | null): ReplayHint[] {
  const { status, trip } = end;
  if (status === 'finished' && halt) {
    const text = `The run ended well, and this envelope would have ended it at ${sayS(halt.tS)} (${halt.cause}).`;
    return [{ kind: 'nuisance', text }];
  }
  if (trip === null || !enveloped.some((start) => trip.cause.startsWith(start))) return [];
  const really = `The run tripped at ${sayS(trip.tS)} (${trip.cause})`;
  if (halt === null) {
    return [{ kind: 'missing', text: `${really}, and this envelope would not have ended it.` }];
  }
  if (halt.tS <= trip.tS + lateS) return [];
  const text = `${really}, and this envelope would have ended it ${sayS(halt.tS - trip.tS)} later (${halt.cause}).`;
  return [{ kind: 'late', text }];
}

const sayS = (s: number): string => `${Number(s.toFixed(3))} s`;
