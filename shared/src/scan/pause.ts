import { DomainError } from '../errors/domain-error.js';
import { type EngineState, requireRigEvent } from './engine-state.js';

/** Pauses the run that is going on: bases are held, dithers cease, the sequencer's time stands still. */
export function pauseRun(engine: EngineState, reason: string): void {
  if (!engine.run || engine.run.isPaused) return;
  engine.run.isPaused = true;
  engine.isStatusChanged = true;
  engine.log.add({ type: 'run.paused', reason });
}

/**
 * @throws run.not-running where there is no run that is paused
 * @throws rig.cause-present where an interlock that pauses is not clear yet
 */
export function resumeRun(engine: EngineState, by: string): void {
  requireRigEvent(engine, { type: 'resume' });
  if (!engine.run?.isPaused) throw new DomainError('run.not-running', 'The run is not paused.');
  engine.fitted?.interlocks.forEachViolated(({ id, action, message }) => {
    if (action !== 'pause') return;
    throw new DomainError('rig.cause-present', `Interlock "${id}" still holds the run: ${message}`);
  });
  engine.run.isPaused = false;
  engine.isStatusChanged = true;
  engine.log.add({ type: 'run.resumed', by });
}
