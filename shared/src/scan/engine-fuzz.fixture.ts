import fc from 'fast-check';
import { DomainError } from '../errors/domain-error.js';
import type { ActuatorRequest } from '../experiments/sequencer.types.js';
import { FakePlant, plantEnvelope, plantOrder, plantRig, scriptedSequencer } from './fake-plant.fixture.js';
import type { MoveHold } from './held-move.schema.js';
import type { ScanOutput } from './scan-engine.types.js';

/** What can happen to a rig between two scans. */
export type FuzzAction =
  | { do: 'scan'; count: number; dtS: number }
  | { do: 'arm' | 'disarm' | 'start' | 'pause' | 'resume' | 'stop' | 'emergency-stop' | 'reset' | 'heal' }
  | { do: 'move'; channel: string; value: number; hold: MoveHold | null }
  | { do: 'release'; channel: string; holdId: string }
  | { do: 'lose' | 'restore'; connection: string }
  | { do: 'spoil' | 'stick'; channel: string }
  | { do: 'read'; temp: number }
  | { do: 'late'; latenessS: number }
  | { do: 'silent'; serverSilentS: number }
  | { do: 'lockout'; isLockedOut: boolean }
  | { do: 'by-hand'; channel: string; value: number }
  | { do: 'envelope'; rest: number };

const actuator = fc.constantFrom('valve', 'fan');
const connection = fc.constantFrom('main', 'aux');
const number = fc.oneof(
  { weight: 5, arbitrary: fc.double({ min: -50, max: 150, noNaN: true }) },
  { weight: 1, arbitrary: fc.constantFrom(NaN, Infinity, -Infinity, 1e300) },
);

const press = fc.constantFrom('a', 'b', 'c');
const hold = fc.option(fc.record({ id: press, forS: fc.constantFrom(0.1, 0.5, 2) }));

const scan = fc.record({
  do: fc.constant('scan' as const),
  count: fc.integer({ min: 1, max: 12 }),
  dtS: fc.constantFrom(0.1, 0.1, 0.1, 0.05, 0.13, 2),
});

const fuzzAction: fc.Arbitrary<FuzzAction> = fc.oneof(
  { weight: 10, arbitrary: scan },
  { weight: 4, arbitrary: fc.record({ do: fc.constantFrom('arm', 'start', 'heal', 'reset') }) },
  {
    weight: 2,
    arbitrary: fc.record({ do: fc.constantFrom('disarm', 'pause', 'resume', 'stop', 'emergency-stop') }),
  },
  { weight: 2, arbitrary: fc.record({ do: fc.constant('move'), channel: actuator, value: number, hold }) },
  { weight: 1, arbitrary: fc.record({ do: fc.constant('release'), channel: actuator, holdId: press }) },
  { weight: 1, arbitrary: fc.record({ do: fc.constantFrom('lose', 'restore'), connection }) },
  { weight: 1, arbitrary: fc.record({ do: fc.constantFrom('spoil', 'stick'), channel: actuator }) },
  { weight: 1, arbitrary: fc.record({ do: fc.constant('read'), temp: number }) },
  { weight: 1, arbitrary: fc.record({ do: fc.constant('late'), latenessS: fc.constantFrom(0, 0.2) }) },
  { weight: 1, arbitrary: fc.record({ do: fc.constant('silent'), serverSilentS: fc.constantFrom(0, 9) }) },
  { weight: 1, arbitrary: fc.record({ do: fc.constant('lockout'), isLockedOut: fc.boolean() }) },
  {
    weight: 1,
    arbitrary: fc.record({
      do: fc.constant('by-hand'),
      channel: actuator,
      value: fc.double({ min: -20, max: 120, noNaN: true }),
    }),
  },
  {
    weight: 1,
    arbitrary: fc.record({ do: fc.constant('envelope'), rest: fc.double({ min: 0, max: 100, noNaN: true }) }),
  },
);

/** Brings the rig as far as it will go, so that what follows meets it at work. */
const toWork: FuzzAction[] = [
  { do: 'heal' },
  { do: 'scan', count: 12, dtS: 0.2 },
  { do: 'reset' },
  { do: 'arm' },
  { do: 'start' },
  { do: 'scan', count: 5, dtS: 0.1 },
];

const episode: fc.Arbitrary<FuzzAction[]> = fc.oneof(
  { weight: 6, arbitrary: fuzzAction.map((action) => [action]) },
  { weight: 1, arbitrary: fc.constant(toWork) },
);

const request: fc.Arbitrary<ActuatorRequest> = fc.record({
  channel: fc.oneof({ weight: 20, arbitrary: actuator }, { weight: 1, arbitrary: fc.constant('free') }),
  base: fc.oneof(
    { weight: 30, arbitrary: fc.double({ min: -50, max: 150, noNaN: true }) },
    { weight: 1, arbitrary: number },
  ),
  dither: fc.double({ min: -9, max: 9, noNaN: true }),
});

const category = fc.constantFrom(0, 1, 2);

/** A whole life of a rig: how it is set up, what its experiment wants, and what happens. */
export const fuzzCases = fc.record({
  categories: fc.tuple(category, category),
  orders: fc.tuple(fc.integer({ min: 0, max: 1 }), fc.integer({ min: 0, max: 1 })),
  whenFoundOutside: fc.constantFrom('slew-in', 'refuse'),
  gridStep: fc.constantFrom(0, 0.1, 2.5),
  script: fc.array(fc.array(request, { maxLength: 3 }), { minLength: 1, maxLength: 40 }),
  actions: fc.array(episode, { minLength: 5, maxLength: 60 }).map((episodes) => episodes.flat()),
});
export type FuzzCase = typeof fuzzCases extends fc.Arbitrary<infer T> ? T : never;

export interface FuzzScan {
  phaseBefore: string;
  phaseAfter: string;
  output: ScanOutput;
  dtS: number;
  /** Good read-back of each actuator before the scan, NaN where there was none. */
  readBack: Record<string, number>;
  lost: string[];
  rest: Record<string, number>;
}

/** Lives the case through, and shows every scan to `check`. Refused commands are part of life. */
export function live(fuzzCase: FuzzCase, check: (scan: FuzzScan) => void): void {
  const { script, gridStep } = fuzzCase;
  let rest = 20;
  const { sequencer } = scriptedSequencer((_, step) =>
    step % 50 === 49
      ? { end: { verdict: 'pass', reason: 'Done.' } }
      : { requests: script[step % script.length] ?? [] },
  );
  const envelope = () => plantEnvelope(limitsOf(fuzzCase, rest));
  const grids = new Map([['valve', { step: gridStep, origin: 0.3 }]]);
  const plant = new FakePlant({ sequencer, envelope: envelope(), grids });
  for (const action of fuzzCase.actions) {
    if (action.do === 'scan') {
      for (let i = 0; i < action.count; i++) check(scanOnce(plant, action.dtS, { valve: rest, fan: 0 }));
    } else {
      tolerate(() => {
        if (action.do !== 'envelope') return act(plant, action);
        const before = rest;
        rest = action.rest;
        try {
          plant.engine.setEnvelope(envelope());
        } catch (error) {
          rest = before;
          throw error;
        }
      });
    }
  }
}

function limitsOf({ categories, orders, whenFoundOutside }: FuzzCase, rest: number) {
  const common = { whenFoundOutside, readBackTolerance: 3 };
  return {
    valve: { ...common, rest, stopCategory: categories[0], stopOrder: orders[0] },
    fan: { ...common, stopCategory: categories[1], stopOrder: orders[1] },
  };
}

function scanOnce(plant: FakePlant, dtS: number, rest: Record<string, number>): FuzzScan {
  const phaseBefore = plant.phase;
  const lost = [...plant.lost];
  const readBack = Object.fromEntries(
    plantRig.channels.flatMap((channel) => {
      if (channel.kind !== 'actuator') return [];
      const isGood = !lost.includes(channel.connection) && !plant.bad.has(channel.id);
      return [[channel.id, isGood ? (plant.at[channel.id] ?? NaN) : NaN]];
    }),
  );
  const output = plant.scan({ dtS });
  return { phaseBefore, phaseAfter: plant.phase, output, dtS, readBack, lost, rest };
}

function act(plant: FakePlant, action: Exclude<FuzzAction, { do: 'scan' | 'envelope' }>): void {
  const { engine } = plant;
  switch (action.do) {
    case 'arm':
      return engine.arm('t');
    case 'disarm':
      return engine.disarm('t');
    case 'start':
      return void engine.startRun(plantOrder);
    case 'pause':
      return engine.pause('t', 'p');
    case 'resume':
      return engine.resume('t');
    case 'stop':
      return engine.stop('t', 's');
    case 'emergency-stop':
      return engine.emergencyStop('t', 'e', 0);
    case 'reset':
      return engine.reset('t', 'r');
    case 'heal':
      return plant.heal();
    case 'move':
      return void engine.move(action.channel, action.value, 't', action.hold);
    case 'release':
      return engine.releaseMove(action.channel, action.holdId);
    case 'lose':
      return void plant.lost.push(action.connection);
    case 'restore':
      plant.lost = plant.lost.filter((id) => id !== action.connection);
      return;
    case 'spoil':
      return void plant.bad.add(action.channel);
    case 'stick':
      return void plant.stuck.add(action.channel);
    case 'read':
      plant.at.temp = action.temp;
      return;
    case 'late':
      plant.latenessS = action.latenessS;
      return;
    case 'silent':
      plant.serverSilentS = action.serverSilentS;
      return;
    case 'lockout':
      return engine.setLockout(action.isLockedOut);
    case 'by-hand':
      if (plant.phase === 'idle' || plant.phase === 'offline') plant.at[action.channel] = action.value;
  }
}

function tolerate(command: () => void): void {
  try {
    command();
  } catch (error) {
    if (!(error instanceof DomainError) || error.code === 'server.bug') throw error;
  }
}
