import { describe, expect, it } from 'vitest';
import {
  testChain,
  testEnvelope,
  testObjective,
  testRig,
  testStep,
} from '../experiments/experiment.fixture.js';
import type { Step } from '../experiments/experiment.schema.js';
import { createSequencer } from '../experiments/sequencer.js';
import { preflight } from '../experiments/preflight.js';
import { rigSchema, type Rig } from '../rigs/rig.schema.js';
import {
  eventTypes,
  FakePlant,
  plantEnvelope,
  plantOrder,
  plantRig,
  scriptedSequencer,
} from './fake-plant.fixture.js';

const display = { min: 0, max: 100, decimals: 1 };
const wired = { connection: 'aux', address: { name: 'beam' } };
const axis = { title: 'Place', unit: 'mm', from: -5, step: 0.5 };
const beam = { kind: 'trace', id: 'beam', title: 'Beam', unit: 'mV', display, ...wired, axis };
const derived = (id: string, unit: string, expression: string) => ({
  kind: 'derived',
  id,
  title: id,
  unit,
  display,
  expression,
});
const traceRig = (...more: object[]): Rig =>
  rigSchema.parse({
    ...plantRig,
    channels: [...plantRig.channels, beam, derived('beamAt', 'mm', 'peakAt(beam)'), ...more],
  });
const bump = (at: number, count = 512) =>
  Float64Array.from({ length: count }, (_, i) => 10 - (axis.from + i * axis.step - at) ** 2 / 10);
const interlock = (condition: string) => ({
  id: 'beam',
  title: 'Beam',
  condition,
  action: 'trip',
  delayS: 0,
  message: 'The beam has left.',
});
const plantWith = (
  content: object = {},
  rig = traceRig(),
  sequencer = scriptedSequencer(() => ({})).sequencer,
) => {
  const plant = new FakePlant({ rig, envelope: plantEnvelope({ content }), sequencer });
  plant.traces.beam = bump(3);
  return plant;
};
const valueOf = (plant: FakePlant, channel: string) => {
  const { readings } = plant.engine;
  return readings.goodValue(readings.indexOf(channel));
};

describe('a trace channel in the scan', () => {
  it('is measured by derived channels in the same scan, whatever its length', () => {
    const plant = plantWith();
    plant.scan();
    expect(valueOf(plant, 'beamAt')).toBeCloseTo(3, 5);
    plant.traces.beam = bump(1.25, 40);
    plant.scan();
    expect(valueOf(plant, 'beamAt')).toBeCloseTo(1.25, 5);
    plant.traces.beam = [];
    plant.scan();
    expect(valueOf(plant, 'beamAt')).toBeNaN();
    expect(valueOf(plant, 'beam')).toBeNaN();
  });

  it('serves an objective over the trace', () => {
    const values: number[] = [];
    const { sequencer } = scriptedSequencer(({ objective }) => (values.push(objective.value), {}));
    const plant = plantWith({}, traceRig(), sequencer).arm();
    const content = {
      title: 'Height',
      expression: 'peak(beam) - 0.1 * temp',
      unit: 'mV',
      direction: 'maximise' as const,
    };
    const validity = [{ condition: 'widthAt(beam, 5) < 20', message: 'Too wide.' }];
    plant.engine.startRun({ ...plantOrder, objective: { ...content, validity } });
    plant.scan();
    plant.bad.add('beam');
    plant.scan();
    expect(values[0]).toBeCloseTo(5, 5);
    expect(values[1]).toBeNaN();
  });

  it('has no column: a row holds numbers only, each in its own', () => {
    const plant = plantWith().run();
    const { row } = plant.scan();
    expect(plant.columns).not.toContain('beam');
    expect(plant.columns).toHaveLength(row?.length ?? 0);
    expect(row?.[plant.columns.indexOf('beamAt')]).toBeCloseTo(3, 5);
    expect(row?.[plant.columns.indexOf('temp')]).toBe(50);
    expect(row?.[plant.columns.indexOf('valve.applied')]).toBe(20);
  });

  it('is never an actuator', () => {
    const plant = plantWith().arm();
    expect(() => plant.engine.move('beam', 1, 'technician')).toThrow(/beam/);
    const limits = [{ ...plantEnvelope().content.limits[0], channel: 'beam' }];
    expect(() => plantWith({ limits })).toThrow(expect.objectContaining({ code: 'channel.not-found' }));
  });
});

describe('safety over a trace channel', () => {
  it('trips by an interlock as soon as what it measures goes out', () => {
    const plant = plantWith({ interlocks: [interlock('peakAt(beam) > 6')] }).arm();
    expect(plant.scan().events).toEqual([]);
    plant.traces.beam = bump(7);
    expect(eventTypes(plant.scan())).toContain('interlock.acted');
    expect(plant.phase).toBe('tripped');
  });

  it.each([
    ['fails', (plant: FakePlant) => plant.bad.add('beam')],
    ['is empty', (plant: FakePlant) => (plant.traces.beam = [])],
    ['has a hole', (plant: FakePlant) => (plant.traces.beam = [1, NaN, 2])],
    ['is too long', (plant: FakePlant) => (plant.traces.beam = bump(3, 5000))],
  ])('counts an interlock as violated where the trace %s', (_name, spoil) => {
    const plant = plantWith({ interlocks: [interlock('peakAt(beam) > 6')] }).arm();
    spoil(plant);
    plant.scan();
    expect(plant.phase).toBe('tripped');
  });

  it('trips when the trace is stale for longer than the envelope allows', () => {
    const plant = plantWith({ staleness: [{ channel: 'beam', afterS: 0.5 }] }).arm();
    plant.scans(8);
    expect(plant.phase).toBe('armed');
    plant.bad.add('beam');
    plant.scans(4);
    expect(plant.phase).toBe('armed');
    plant.scans(3);
    expect(plant.engine.status().trip?.cause).toBe('stale:beam');
  });

  it('keeps the rig from being armed while the trace does not come', () => {
    const plant = plantWith({ staleness: [{ channel: 'beam', afterS: 0.5 }] });
    plant.bad.add('beam');
    plant.scan();
    expect(() => plant.engine.arm('technician')).toThrow(/arm/i);
  });

  it('blanks the trace of a lost connection', () => {
    const plant = plantWith();
    plant.scan();
    plant.lost = ['aux'];
    plant.scan();
    const { readings } = plant.engine;
    expect(readings.goodTrace(readings.indexOf('beam'))).toBeNull();
    expect(valueOf(plant, 'beamAt')).toBeNaN();
  });

  it.each(['beam + 1', 'peakAt(temp)', 'mean(beamAt)'])('refuses the derived channel %s', (expression) => {
    expect(() => new FakePlant({ rig: traceRig(derived('wrong', '', expression)) })).toThrow(
      expect.objectContaining({ code: 'expression.invalid' }),
    );
  });
});

describe('preflight over a trace channel', () => {
  const rig = (...more: object[]) => {
    const { channels, ...rest } = testRig();
    return rigSchema.parse({ ...rest, channels: [...channels, { ...beam, connection: 'plc' }, ...more] });
  };
  const faultsOf = (step: Step, of = rig()) =>
    preflight({ graph: testChain(step), objective: testObjective(), envelope: testEnvelope(), rig: of })
      .filter(({ code }) => code !== 'preflight.open-port')
      .map(({ field, message }) => `${field}: ${message}`);
  const check = (criterion: string) => testStep('check', { criterion });

  it('takes a criterion over it, and refuses the trace as a number', () => {
    expect(faultsOf(check('peakAt(beam) < 6'))).toEqual([]);
    expect(faultsOf(check('beam < 6'))).toEqual([
      'parameters.criterion: "beam" is a trace, not a number: make one of it, as in mean(beam) or peak(beam).',
    ]);
  });

  it('cannot wait for it to settle', () => {
    expect(faultsOf(testStep('settle', { channel: 'beam' }))).toEqual([
      'parameters.channel: "beam" is a trace: make a derived channel of it, as in mean(beam), and wait for that.',
    ]);
  });

  it('warns of units that do not go together with its axis', () => {
    const late = derived('late', 's', 'peakAt(beam)');
    expect(faultsOf(check('late < 6'), rig(late))).toEqual([
      expect.stringMatching(/^rig\.channels\[\d+\]\.expression: .*comes out in mm and stands for s/),
    ]);
  });

  it('evaluates a criterion over it when the step is there', () => {
    const { sequencer } = {
      sequencer: createSequencer({
        rig: traceRig(),
        envelope: plantEnvelope().content,
        objective: null,
        graph: testChain(check('peakAt(beam) > 2 and count(beam) == 512')),
        periodS: 0.1,
      }),
    };
    const plant = plantWith({}, traceRig(), sequencer).run();
    const events = plant.scans(5).flatMap(({ events }) => events.map(({ body }) => body));
    expect(events).toContainEqual(expect.objectContaining({ type: 'check.decided', isMet: true }));
  });
});
