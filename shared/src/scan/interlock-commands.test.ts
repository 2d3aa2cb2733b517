import { describe, expect, it } from 'vitest';
import { eventTypes, FakePlant, plantEnvelope } from './fake-plant.fixture.js';

const lock = {
  id: 'hot',
  title: 'Too hot',
  condition: 'temp > 90',
  delayS: 0,
  action: 'trip',
  protects: 'equipment',
  bypassAtMostS: 5,
  message: 'Look at the heater.',
};
const plantWith = (change: object = {}, content: object = {}) =>
  new FakePlant({
    envelope: plantEnvelope({ content: { interlocks: [{ ...lock, ...change }], ...content } }),
  });
const bypass = { interlock: 'hot', forS: 1, by: 'safety officer', reason: 'Sensor is being changed.' };

describe('bypassing an interlock', () => {
  it('keeps it from acting for its time, then it acts, and all of it is told', () => {
    const plant = plantWith().arm();
    plant.engine.bypassInterlock(bypass);
    plant.at['temp'] = 95;
    const first = plant.scan();
    expect([plant.phase, eventTypes(first)]).toEqual(['armed', ['interlock.bypassed']]);
    const later = plant.scans(12).flatMap(eventTypes);
    expect(plant.phase).toBe('tripped');
    expect(later).toEqual(['interlock.bypass-ended', 'interlock.acted', 'rig.tripped']);
  });

  it('can be ended early', () => {
    const plant = plantWith().arm();
    plant.engine.bypassInterlock(bypass);
    plant.at['temp'] = 95;
    plant.scan();
    plant.engine.endBypass('hot', 'technician');
    plant.scan();
    expect(plant.phase).toBe('tripped');
  });

  it.each([
    ['without permission of the envelope', { bypassAtMostS: null }, bypass, 'interlock.no-bypass'],
    ['for longer than allowed', {}, { ...bypass, forS: 6 }, 'request.invalid'],
    ['without a reason', {}, { ...bypass, reason: ' ' }, 'request.invalid'],
    ['that there is not', {}, { ...bypass, interlock: 'cold' }, 'interlock.not-found'],
  ])('is refused %s', (_what, change, order, code) => {
    const plant = plantWith(change).arm();
    expect(() => plant.engine.bypassInterlock(order)).toThrow(expect.objectContaining({ code }));
  });

  it('is refused by the document itself for a trip that protects people', () => {
    expect(() => plantWith({ protects: 'people' })).toThrow(/protects people/);
  });
});

describe('acknowledging an interlock', () => {
  it('ends a latched pause, and only then can the run go on', () => {
    const plant = plantWith({ action: 'pause', isLatching: true }).run();
    plant.at['temp'] = 95;
    plant.scan();
    plant.at['temp'] = 50;
    plant.scan();
    expect(() => plant.engine.resume('technician')).toThrow();
    plant.engine.acknowledgeInterlock('hot', 'technician');
    plant.engine.resume('technician');
    expect(plant.engine.status().isPaused).toBe(false);
    expect(() => plant.engine.acknowledgeInterlock('hot', 'technician')).toThrow(
      expect.objectContaining({ code: 'interlock.not-latched' }),
    );
  });
});

describe('forcing an interlock for its proof test', () => {
  const order = { interlock: 'hot', forS: 1, by: 'safety officer' };

  it('does what the interlock would do, in the next scan', () => {
    const plant = plantWith().arm();
    plant.engine.forceInterlock(order);
    const output = plant.scan();
    expect(eventTypes(output)).toEqual(['interlock.forced', 'interlock.acted', 'rig.tripped']);
    expect(output.writes.map(({ channel }) => channel)).toContain('valve');
    expect(plant.engine.status().interlocks[0]).toMatchObject({ state: 'acted', isForced: true });
    // The trip can be reset once the force has run out.
    plant.scans(40);
    plant.engine.reset('safety officer', 'Proof test passed.');
    expect(plant.phase).toBe('idle');
  });

  it('needs an armed rig without a run: else nothing would follow, or too much', () => {
    const idle = plantWith();
    idle.scan();
    expect(() => idle.engine.forceInterlock(order)).toThrow(
      expect.objectContaining({ code: 'rig.not-armed' }),
    );
    const running = plantWith().run();
    expect(() => running.engine.forceInterlock(order)).toThrow(expect.objectContaining({ code: 'rig.busy' }));
  });

  it('goes before a bypass', () => {
    const plant = plantWith().arm();
    plant.engine.bypassInterlock(bypass);
    plant.engine.forceInterlock(order);
    plant.scan();
    expect(plant.phase).toBe('tripped');
  });
});

describe('an input from a hard-wired emergency stop', () => {
  const content = {
    interlocks: [],
    emergencyStopInputs: [{ channel: 'temp', title: 'Emergency stop at the door', pressedWhen: 'zero' }],
  };

  it.each(['idle', 'armed', 'running'])('trips a rig that is %s', (phase) => {
    const plant = plantWith({}, content);
    if (phase === 'idle') plant.scan();
    else if (phase === 'armed') plant.arm();
    else plant.run();
    plant.at['temp'] = 0;
    plant.scan();
    const { trip } = plant.engine.status();
    expect(trip).toMatchObject({
      cause: 'emergency-stop-input:temp',
      message: 'Emergency stop at the door is pressed.',
    });
  });

  it('counts as pressed where it cannot be read and there may be motion; at rest it forbids arming', () => {
    const armed = plantWith({}, content).arm();
    armed.bad.add('temp');
    armed.scan();
    expect(armed.engine.status().trip?.cause).toBe('emergency-stop-input:temp');
    const idle = plantWith({}, content);
    idle.bad.add('temp');
    idle.scan();
    expect(idle.phase).toBe('idle');
    expect(() => idle.engine.arm('technician')).toThrow(expect.objectContaining({ code: 'rig.cannot-arm' }));
  });

  it('cannot be reset while it is pressed', () => {
    const plant = plantWith({}, content).arm();
    plant.at['temp'] = 0;
    plant.scans(60);
    expect(() => plant.engine.reset('officer', 'All clear.')).toThrow(
      expect.objectContaining({ code: 'rig.cause-present' }),
    );
    plant.at['temp'] = 1;
    plant.scan();
    plant.engine.reset('officer', 'All clear.');
    expect(plant.phase).toBe('idle');
  });
});
