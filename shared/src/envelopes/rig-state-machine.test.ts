import { describe, expect, it } from 'vitest';
import {
  allRigEvents,
  brokenInvariants,
  exploreRigStates,
  rigInvariants,
} from './explore-rig-states.fixture.js';
import {
  rigEventTypes,
  type RigEventType,
  type RigMove,
  type RigMoves,
  rigMoves,
  rigPhases,
} from './rig-moves.js';
import { initialRigState, isRefusal, type RigEvent, type RigState, transition } from './rig-state-machine.js';
import type { RigPhase } from '../live/rig-status.schema.js';

/** The table with one cell changed. */
function mutated(phase: RigPhase, event: RigEventType, move: RigMove): RigMoves {
  return { ...rigMoves, [phase]: { ...rigMoves[phase], [event]: move } };
}

const note = (cause: string) => ({ cause, message: cause, at: '2026-01-01T00:00:00.000Z', by: null });

function go(state: RigState, ...events: RigEvent[]): RigState {
  return events.reduce((before, event) => {
    const outcome = transition(before, event);
    if (isRefusal(outcome)) throw new Error(`${event.type} refused: ${outcome.refusal}`);
    return outcome;
  }, state);
}

describe('the rig state machine, explored from every start', () => {
  const exploration = exploreRigStates();

  it.each(Object.keys(rigInvariants))('keeps: %s', (name) => {
    const broken = exploration.steps.filter((step) => !rigInvariants[name]?.(step));
    expect(broken.slice(0, 3)).toEqual([]);
  });

  it('tries every event in every reachable state, and reaches every phase', () => {
    const { states, steps } = exploration;
    const counts = Object.fromEntries(
      rigPhases.map((phase) => [phase, states.filter((state) => state.phase === phase).length]),
    );
    /** Beside offline, idle and stopping: with and without lockout. Tripped: with the orders of causes. */
    expect(counts).toMatchObject({ offline: 2, idle: 2, armed: 1, running: 1, stopping: 2 });
    expect(steps.length).toBe(states.length * allRigEvents.length);
    /**
     * Tripped by hand count: (1 + 3 + 6 + 6) orders of later causes behind `host-lost` and 3 × (1 + 2 + 2)
     * behind another first cause, each with and without wire and lockout: 31 × 4; the other phases have 8.
     */
    expect(counts.tripped).toBe(31 * 4);
    expect({ states: states.length, transitions: steps.length }).toEqual({ states: 132, transitions: 4752 });
  });

  it('has a cell for every phase and event', () => {
    for (const phase of rigPhases) expect(Object.keys(rigMoves[phase])).toEqual([...rigEventTypes]);
  });

  it('never changes the state that it was given', () => {
    const { steps } = exploreRigStates();
    const frozen = steps.map(({ before, event }) => ({
      before: JSON.stringify(before),
      event,
      state: before,
    }));
    for (const { before, event, state } of frozen) {
      transition(state, event);
      expect(JSON.stringify(state)).toBe(before);
    }
  });
});

describe('a wrong table is found out', () => {
  const mutations: [string, RigMoves, string][] = [
    ['arming out of tripped', mutated('tripped', 'arm', { to: 'armed' }), 'nothing moves from tripped'],
    [
      'a reset that arms',
      mutated('tripped', 'reset', { to: 'armed', when: 'may-reset' }),
      'a reset leads to idle, or to offline while the wire is down',
    ],
    [
      'a reset that does not ask for the cause',
      mutated('tripped', 'reset', { to: 'idle', orOffline: true }),
      'only a reset without a present cause and with a reason leaves tripped',
    ],
    [
      'a reset to idle without a wire',
      mutated('tripped', 'reset', { to: 'idle', when: 'may-reset' }),
      'a reset leads to idle, or to offline while the wire is down',
    ],
    [
      'a trip that is lost with the wire',
      mutated('tripped', 'wire-lost', { to: 'offline' }),
      'the wire and the lockout never clear a trip',
    ],
    [
      'a trip that is lost with its return',
      mutated('tripped', 'wire-restored', { to: 'idle' }),
      'the wire and the lockout never clear a trip',
    ],
    [
      'arming that asks for nothing',
      mutated('idle', 'arm', { to: 'armed' }),
      'arming needs envelope, no lockout, fresh sensors, clear interlocks and the wire',
    ],
    [
      'an emergency stop that is refused while offline',
      mutated('offline', 'emergency-stop', { refuse: 'rig.offline' }),
      'the emergency stop is accepted in every state and latched',
    ],
    [
      'an emergency stop that only stops in order',
      mutated('running', 'emergency-stop', { to: 'stopping' }),
      'the emergency stop is accepted in every state and latched',
    ],
    [
      'a run on a rig that is not armed',
      mutated('idle', 'start-run', { to: 'running' }),
      'a run begins only by being started on an armed rig',
    ],
    [
      'a lost wire that leaves the run going',
      mutated('running', 'wire-lost', { to: 'running' }),
      'a wire that is lost while something may move is a trip',
    ],
    [
      'a lockout that leaves the rig armed',
      mutated('armed', 'lock-out', { to: 'armed' }),
      'nothing obeys commands while the wire is down or the rig is locked out',
    ],
    [
      'a stop that skips the stop action',
      mutated('running', 'stop', { to: 'idle' }),
      'what may move is brought to rest before it is idle',
    ],
  ];

  it.each(mutations)('%s', (_, moves, law) => {
    expect(brokenInvariants(exploreRigStates(moves))).toContain(law);
  });

  it('while the right one breaks no law', () => {
    expect(brokenInvariants(exploreRigStates())).toEqual([]);
  });
});

describe('a latched trip', () => {
  const tripped = go(
    initialRigState(null, false),
    { type: 'wire-restored' },
    { type: 'emergency-stop', note: note('emergency-stop') },
  );

  it('keeps its first cause and lists what follows, each once', () => {
    const later = go(
      tripped,
      { type: 'trip', note: note('stale:o2') },
      { type: 'wire-lost', note: note('connection:main') },
      { type: 'trip', note: note('stale:o2') },
      { type: 'emergency-stop', note: note('emergency-stop') },
    );
    expect(later.trip?.cause).toBe('emergency-stop');
    expect(later.trip?.later.map(({ cause }) => cause)).toEqual(['stale:o2', 'connection:main']);
  });

  it('lists fifty later causes at most', () => {
    const causes = Array.from({ length: 80 }, (_, i) => ({
      type: 'trip' as const,
      note: note(`stale:c${i}`),
    }));
    expect(go(tripped, ...causes).trip?.later).toHaveLength(50);
  });
});
