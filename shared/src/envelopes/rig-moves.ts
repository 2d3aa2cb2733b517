import type { ErrorCode } from '../errors/error-catalogue.js';
import { rigPhaseSchema, type RigPhase } from '../live/rig-status.schema.js';

export const rigPhases = rigPhaseSchema.options;

/** All that can happen to a rig, as far as its phase is concerned. */
export const rigEventTypes = [
  /** Every connection is up. */
  'wire-restored',
  /** At least one connection is down. */
  'wire-lost',
  'arm',
  /** Ends an armed rig in order: to rest, then idle. */
  'disarm',
  'manual-move',
  'start-run',
  'pause',
  'resume',
  /** An ordered stop, or the end of a run by its experiment. */
  'stop',
  /** The stop action is complete. */
  'came-to-rest',
  'trip',
  'emergency-stop',
  'reset',
  'lock-out',
  'lift-lockout',
  'set-envelope',
] as const;
export type RigEventType = (typeof rigEventTypes)[number];

/** One cell of the table: where the event leads, or the code with which it is refused. */
export type RigMove =
  { to: RigPhase; when?: 'may-arm' | 'may-reset'; orOffline?: boolean } | { refuse: ErrorCode };
export type RigMoves = Record<RigPhase, Record<RigEventType, RigMove>>;

/** Which writes to actuators a phase permits; the heartbeat is beside this. */
export const motionOf: Record<RigPhase, 'none' | 'commands' | 'stop-action'> = {
  offline: 'none',
  idle: 'none',
  armed: 'commands',
  running: 'commands',
  stopping: 'stop-action',
  tripped: 'stop-action',
};

const to = (phase: RigPhase): RigMove => ({ to: phase });
const refuse = (code: ErrorCode): RigMove => ({ refuse: code });

/** The rig's phases × events. What is written here is all that can happen. */
export const rigMoves: RigMoves = {
  offline: {
    'wire-restored': to('idle'),
    'wire-lost': to('offline'),
    arm: refuse('rig.offline'),
    disarm: refuse('rig.not-armed'),
    'manual-move': refuse('rig.offline'),
    'start-run': refuse('rig.offline'),
    pause: refuse('run.not-running'),
    resume: refuse('run.not-running'),
    stop: refuse('run.not-running'),
    'came-to-rest': to('offline'),
    trip: to('tripped'),
    'emergency-stop': to('tripped'),
    reset: refuse('rig.not-tripped'),
    'lock-out': to('offline'),
    'lift-lockout': to('offline'),
    'set-envelope': to('offline'),
  },
  idle: {
    'wire-restored': to('idle'),
    'wire-lost': to('offline'),
    arm: { to: 'armed', when: 'may-arm' },
    disarm: refuse('rig.not-armed'),
    'manual-move': refuse('rig.not-armed'),
    'start-run': refuse('rig.not-armed'),
    pause: refuse('run.not-running'),
    resume: refuse('run.not-running'),
    stop: refuse('run.not-running'),
    'came-to-rest': to('idle'),
    trip: to('tripped'),
    'emergency-stop': to('tripped'),
    reset: refuse('rig.not-tripped'),
    'lock-out': to('idle'),
    'lift-lockout': to('idle'),
    'set-envelope': to('idle'),
  },
  armed: {
    'wire-restored': to('armed'),
    'wire-lost': to('tripped'),
    arm: refuse('rig.illegal-move'),
    disarm: to('stopping'),
    'manual-move': to('armed'),
    'start-run': to('running'),
    pause: refuse('run.not-running'),
    resume: refuse('run.not-running'),
    stop: to('stopping'),
    'came-to-rest': to('armed'),
    trip: to('tripped'),
    'emergency-stop': to('tripped'),
    reset: refuse('rig.not-tripped'),
    'lock-out': to('stopping'),
    'lift-lockout': to('armed'),
    'set-envelope': refuse('rig.busy'),
  },
  running: {
    'wire-restored': to('running'),
    'wire-lost': to('tripped'),
    arm: refuse('rig.busy'),
    disarm: refuse('rig.busy'),
    'manual-move': refuse('rig.busy'),
    'start-run': refuse('rig.busy'),
    pause: to('running'),
    resume: to('running'),
    stop: to('stopping'),
    'came-to-rest': to('running'),
    trip: to('tripped'),
    'emergency-stop': to('tripped'),
    reset: refuse('rig.not-tripped'),
    'lock-out': to('stopping'),
    'lift-lockout': to('running'),
    'set-envelope': refuse('rig.busy'),
  },
  stopping: {
    'wire-restored': to('stopping'),
    'wire-lost': to('tripped'),
    arm: refuse('rig.busy'),
    disarm: to('stopping'),
    'manual-move': refuse('rig.busy'),
    'start-run': refuse('rig.busy'),
    pause: refuse('run.not-running'),
    resume: refuse('run.not-running'),
    stop: to('stopping'),
    'came-to-rest': to('idle'),
    trip: to('tripped'),
    'emergency-stop': to('tripped'),
    reset: refuse('rig.not-tripped'),
    'lock-out': to('stopping'),
    'lift-lockout': to('stopping'),
    'set-envelope': refuse('rig.busy'),
  },
  tripped: {
    'wire-restored': to('tripped'),
    'wire-lost': to('tripped'),
    arm: refuse('rig.tripped'),
    disarm: refuse('rig.tripped'),
    'manual-move': refuse('rig.tripped'),
    'start-run': refuse('rig.tripped'),
    pause: refuse('rig.tripped'),
    resume: refuse('rig.tripped'),
    stop: refuse('rig.tripped'),
    'came-to-rest': to('tripped'),
    trip: to('tripped'),
    'emergency-stop': to('tripped'),
    reset: { to: 'idle', when: 'may-reset', orOffline: true },
    'lock-out': to('tripped'),
    'lift-lockout': to('tripped'),
    'set-envelope': to('tripped'),
  },
};
