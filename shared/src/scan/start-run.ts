import { DomainError } from '../errors/domain-error.js';
import { preflight, type PreflightInput } from '../experiments/preflight.js';
import type { PreflightFault } from '../experiments/preflight.types.js';
import { createSequencer } from '../experiments/sequencer.js';
import type { Sequencer, SequencerContext } from '../experiments/sequencer.types.js';
import type { RunOrder } from '../live/host-message.schema.js';
import type { RunColumn } from '../runs/run-columns.js';
import { actuatorsOf, applyRigEvent, type EngineState, requireRigEvent } from './engine-state.js';
import { dropMove } from './held-move.js';
import { noteBypasses } from './interlock-commands.js';
import { RunKeeper } from './run-keeper.js';

/** What the engine needs of experiments; replaced in tests by scripted ones. */
export interface ExperimentParts {
  createSequencer: (context: SequencerContext) => Sequencer;
  preflight: (input: PreflightInput) => readonly PreflightFault[];
}

export const experimentParts: ExperimentParts = { createSequencer, preflight };

/**
 * @returns the columns of the run's rows, in order
 * @throws rig.not-armed, rig.busy, rig.offline, rig.tripped by the rig's phase
 * @throws experiment.preflight-failed, expression.invalid where the order cannot be run
 */
export function startRun(engine: EngineState, order: RunOrder, parts: ExperimentParts): readonly RunColumn[] {
  requireRigEvent(engine, { type: 'start-run' });
  const { rig, fitted, periodS } = engine;
  if (!fitted) throw new DomainError('envelope.none-in-force');
  const { content: envelope } = fitted.inForce;
  const { objective, experiment } = order;
  const context = { rig, envelope, objective, graph: experiment.graph, periodS, grids: engine.grids };
  requirePreflight(parts.preflight(context));
  const sequencer = parts.createSequencer(context);
  const run = new RunKeeper(order, sequencer, rig, engine.readings, fitted.actuators);
  applyRigEvent(engine, { type: 'start-run' });
  for (const actuator of actuatorsOf(engine)) dropMove(actuator);
  engine.run = run;
  engine.log.beginRun(fitted.actuators);
  engine.log.add({ type: 'run.started', by: order.by });
  noteBypasses(engine);
  return run.columns;
}

function requirePreflight(faults: readonly PreflightFault[]): void {
  const errors = faults.filter(({ severity }) => severity === 'error');
  if (errors.length === 0) return;
  const details = errors.map(({ step, field, message }) => ({
    field: ['steps', step, field].filter((part) => part !== null).join('.'),
    message,
  }));
  throw new DomainError('experiment.preflight-failed', undefined, details);
}
