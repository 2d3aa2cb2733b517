import { describe, expect, it } from 'vitest';
import { calibrationInForceSchema, type Conversion } from '../calibrations/calibration.schema.js';
import { emfOf } from '../calibrations/its-90.js';
import { Quality } from '../rigs/quality.js';
import { type Rig, rigSchema } from '../rigs/rig.schema.js';
import { FakePlant, plantRig } from './fake-plant.fixture.js';
import { Readings } from './readings.js';
import { SensorCalibrations } from './sensor-calibrations.js';

const calibration = (channel: string, conversion: Conversion) =>
  calibrationInForceSchema.parse({
    id: channel,
    version: 1,
    channel,
    conversion,
    calibratedOn: '2026-11-02',
    dueOn: null,
    expandedUncertainty: null,
    certificate: '',
    note: '',
  });

const wired = {
  unit: '',
  display: { min: 0, max: 1, decimals: 1 },
  connection: 'main',
  address: {},
};
const rig: Rig = rigSchema.parse({
  id: 'kiln',
  title: 'Kiln',
  periodMs: 100,
  connections: [{ id: 'main', title: 'Main', adapter: 'in-memory', configuration: {} }],
  channels: [
    // The thermocouple stands before its cold junction: the order of the list must not matter.
    { kind: 'sensor', id: 'hot', title: 'Hot', ...wired },
    { kind: 'sensor', id: 'cold', title: 'Cold junction', ...wired },
    { kind: 'actuator', id: 'heat', title: 'Heat', ...wired },
  ],
});
const typeK: Conversion = { kind: 'thermocouple', type: 'K', coldJunction: { channel: 'cold' } };
const platinum: Conversion = { kind: 'platinum', r0Ohm: 100 };

describe('calibrations in the scan', () => {
  it('convert before derived channels and interlocks look', () => {
    const double: Conversion = { kind: 'linear', gain: 2, offset: -50 };
    const plant = new FakePlant({ calibrations: [calibration('temp', double)] });
    plant.at['temp'] = 60;
    plant.scan();
    const at = (id: string) => plant.engine.readings.goodValue(plant.engine.readings.indexOf(id));
    expect(at('temp')).toBe(70);
    expect(at('twice')).toBe(140);
  });

  it('measure the cold junction first, whatever the order of the channels', () => {
    const readings = new Readings(rig.channels.map(({ id }) => id));
    const both = [calibration('hot', typeK), calibration('cold', platinum)];
    const calibrations = new SensorCalibrations(both, rig, readings);
    readings.set(0, emfOf('K', 500) - emfOf('K', 25), Quality.good);
    // IEC 60751: 109.7347 ohm is 25 °C.
    readings.set(1, 109.7347, Quality.good);
    calibrations.apply();
    expect(readings.goodValue(1)).toBeCloseTo(25, 3);
    expect(readings.goodValue(0)).toBeCloseTo(500, 3);
  });

  it('make a thermocouple bad whose cold junction is not known', () => {
    const readings = new Readings(rig.channels.map(({ id }) => id));
    const calibrations = new SensorCalibrations([calibration('hot', typeK)], rig, readings);
    readings.set(0, 10, Quality.good);
    readings.set(1, 25, Quality.stale);
    calibrations.apply();
    expect(readings.qualities[0]).toBe(Quality.bad);
  });

  it('make bad what lies outside the conversion, and leave what was not read', () => {
    const readings = new Readings(plantRig.channels.map(({ id }) => id));
    const table: Conversion = {
      kind: 'table',
      points: [
        { raw: 0, value: 0 },
        { raw: 10, value: 100 },
      ],
    };
    const index = readings.indexOf('temp');
    const calibrations = new SensorCalibrations([calibration('temp', table)], plantRig, readings);
    readings.set(index, 11, Quality.good);
    calibrations.apply();
    expect(readings.qualities[index]).toBe(Quality.bad);
    readings.set(index, 5, Quality.good);
    calibrations.apply();
    readings.set(index, 50, Quality.stale);
    calibrations.apply();
    expect(readings.values[index]).toBe(50);
  });

  it.each([
    ['an unknown channel', calibration('none', platinum), 'calibrations[0].channel'],
    ['an actuator', calibration('heat', platinum), 'calibrations[0].channel'],
    [
      'a cold junction that is no sensor',
      calibration('hot', { ...typeK, coldJunction: { channel: 'heat' } }),
      'calibrations[0].conversion.coldJunction.channel',
    ],
    [
      'a thermocouple as its own cold junction',
      calibration('hot', { ...typeK, coldJunction: { channel: 'hot' } }),
      'calibrations[0].conversion.coldJunction.channel',
    ],
  ])('refuse %s', (_what, faulty, field) => {
    const readings = new Readings(rig.channels.map(({ id }) => id));
    expect(() => new SensorCalibrations([faulty], rig, readings)).toThrow(
      expect.objectContaining({ code: 'channel.not-found', details: [expect.objectContaining({ field })] }),
    );
  });
});
