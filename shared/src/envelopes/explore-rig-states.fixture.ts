import { motionOf, rigEventTypes, type RigMoves, rigMoves } from './rig-moves.js';
import {
  initialRigState,
  isRefusal,
  type RigEvent,
  type RigRefusal,
  type RigState,
  transition,
} from './rig-state-machine.js';

/** Three causes are enough to tell the first from the later ones, in every order. */
const causes = ['emergency-stop', 'connection:main', 'interlock:too-hot'];

const note = (cause: string) => ({
  cause,
  message: `By ${cause}.`,
  at: '2026-01-01T00:00:00.000Z',
  by: null,
});

/** Every event with every combination of what it carries. */
export const allRigEvents: readonly RigEvent[] = rigEventTypes.flatMap((type): RigEvent[] => {
  switch (type) {
    case 'arm':
      return Array.from({ length: 16 }, (_, bits) => ({
        type,
        isEnvelopeInForce: (bits & 1) === 0,
        areSensorsFresh: (bits & 2) === 0,
        areInterlocksClear: (bits & 4) === 0,
        hasOtherObstacle: (bits & 8) !== 0,
      }));
    case 'reset':
      return [0, 1, 2, 3].map((bits) => ({
        type,
        isCausePresent: (bits & 1) !== 0,
        hasReason: (bits & 2) !== 0,
      }));
    case 'emergency-stop':
      return [{ type, note: note('emergency-stop') }];
    case 'wire-lost':
      return [{ type, note: note('connection:main') }];
    case 'trip':
      return causes.map((cause) => ({ type, note: note(cause) }));
    default:
      return [{ type }];
  }
});

export interface RigStep {
  before: RigState;
  event: RigEvent;
  outcome: RigState | RigRefusal;
}

export interface Exploration {
  states: RigState[];
  /** One for each reachable state and each event. */
  steps: RigStep[];
}

/** All states that can be reached from every start, with every event tried in each. */
export function exploreRigStates(moves: RigMoves = rigMoves): Exploration {
  const known = new Map<string, RigState>();
  const open: RigState[] = [];
  const steps: RigStep[] = [];
  const visit = (state: RigState) => {
    const key = JSON.stringify(state);
    if (known.has(key)) return;
    known.set(key, state);
    open.push(state);
  };
  for (const isLockedOut of [false, true]) {
    visit(initialRigState(null, isLockedOut));
    visit(initialRigState({ ...note('host-lost'), later: [] }, isLockedOut));
  }
  for (let state = open.pop(); state; state = open.pop()) {
    for (const event of allRigEvents) {
      const outcome = transition(state, event, moves);
      steps.push({ before: state, event, outcome });
      if (!isRefusal(outcome)) visit(outcome);
    }
  }
  return { states: [...known.values()], steps };
}

/** A named law that every step must keep; returns false where it is broken. */
export type RigInvariant = (step: RigStep) => boolean;

const after = ({ outcome }: RigStep): RigState | null => (isRefusal(outcome) ? null : outcome);
const obeysCommands = (state: RigState | null) => state !== null && motionOf[state.phase] === 'commands';
const causesOf = ({ trip }: RigState) => (trip ? [trip.cause, ...trip.later.map(({ cause }) => cause)] : []);

/** What the safety argument rests on, each as one law over a single step. */
export const rigInvariants: Record<string, RigInvariant> = {
  'nothing moves from tripped': (step) =>
    step.before.phase !== 'tripped' || !['armed', 'running', 'stopping'].includes(after(step)?.phase ?? ''),
  'the latch is set exactly while tripped': (step) => {
    const next = after(step);
    return !next || (next.phase === 'tripped') === (next.trip !== null);
  },
  'only a reset without a present cause and with a reason leaves tripped': (step) => {
    const { before, event } = step;
    const next = after(step);
    if (before.phase !== 'tripped' || !next || next.phase === 'tripped') return true;
    return event.type === 'reset' && !event.isCausePresent && event.hasReason;
  },
  'a reset leads to idle, or to offline while the wire is down': (step) => {
    const next = after(step);
    if (step.event.type !== 'reset' || !next) return true;
    return next.phase === (next.isWireUp ? 'idle' : 'offline');
  },
  'a reset that may be made is not refused': (step) => {
    const { before, event } = step;
    if (before.phase !== 'tripped' || event.type !== 'reset') return true;
    return event.isCausePresent || !event.hasReason || after(step) !== null;
  },
  'arming needs envelope, no lockout, fresh sensors, clear interlocks and the wire': (step) => {
    const { before, event } = step;
    if (obeysCommands(before) || !obeysCommands(after(step))) return true;
    if (event.type !== 'arm' || before.phase !== 'idle') return false;
    const isReady = event.isEnvelopeInForce && event.areSensorsFresh && event.areInterlocksClear;
    return isReady && !event.hasOtherObstacle && !before.isLockedOut && before.isWireUp;
  },
  'a run begins only by being started on an armed rig': (step) => {
    if (step.before.phase === 'running' || after(step)?.phase !== 'running') return true;
    return step.before.phase === 'armed' && step.event.type === 'start-run';
  },
  'the emergency stop is accepted in every state and latched': (step) =>
    step.event.type !== 'emergency-stop' || after(step)?.phase === 'tripped',
  'a trip is accepted in every state and latched': (step) =>
    step.event.type !== 'trip' || after(step)?.phase === 'tripped',
  'the wire and the lockout never clear a trip': (step) => {
    const besides = ['wire-lost', 'wire-restored', 'lock-out', 'lift-lockout', 'set-envelope'];
    if (step.before.phase !== 'tripped' || !besides.includes(step.event.type)) return true;
    return after(step)?.phase === 'tripped';
  },
  'the first cause of a trip is never overwritten': (step) => {
    const next = after(step);
    return !step.before.trip || !next?.trip || next.trip.cause === step.before.trip.cause;
  },
  'each later cause is listed, once, behind those before it': (step) => {
    const next = after(step);
    if (!step.before.trip || !next?.trip) return true;
    const causesBefore = causesOf(step.before);
    const isNew = 'note' in step.event && !causesBefore.includes(step.event.note.cause);
    const expected = isNew && 'note' in step.event ? [...causesBefore, step.event.note.cause] : causesBefore;
    return causesOf(next).join() === expected.join();
  },
  'a wire that is lost while something may move is a trip': (step) => {
    if (step.event.type !== 'wire-lost' || motionOf[step.before.phase] === 'none') return true;
    return after(step)?.phase === 'tripped';
  },
  'nothing obeys commands while the wire is down or the rig is locked out': (step) => {
    const next = after(step);
    return !next || !obeysCommands(next) || (next.isWireUp && !next.isLockedOut);
  },
  'offline means that the wire is down': (step) => {
    const next = after(step);
    return !next || next.phase !== 'offline' || !next.isWireUp;
  },
  'a refusal changes nothing': (step) => !isRefusal(step.outcome) || !('phase' in step.outcome),
  'what may move is brought to rest before it is idle': (step) => {
    if (!obeysCommands(step.before)) return true;
    return !['idle', 'offline'].includes(after(step)?.phase ?? '');
  },
};

/** Names of the laws that some step breaks. */
export function brokenInvariants({ steps }: Exploration): string[] {
  return Object.entries(rigInvariants).flatMap(([name, holds]) => (steps.every(holds) ? [] : [name]));
}
