import { describe, expect, it } from 'vitest';
import {
  checkCalibration,
  draftKeyOf,
  emptyCalibration,
  pointsOf,
  readConversion,
} from './calibration-draft.js';
import { previewCurve } from './preview-curve.js';

const draft = emptyCalibration('2026-11-02');

describe('a calibration that is being typed', () => {
  it('is a straight line that changes nothing, to begin with', () => {
    expect(checkCalibration(draft).content).toEqual({
      conversion: { kind: 'linear', gain: 1, offset: 0 },
      calibratedOn: '2026-11-02',
      dueOn: null,
      expandedUncertainty: null,
      certificate: '',
      note: '',
    });
  });

  it.each([
    ['0\t4\r\n10\t20', 'tab'],
    ['0;4\n10;20,0', 'semicolon'],
    ['0, 4\n10, 20', 'comma'],
    ['0 4\n10   20\n', 'spaces'],
  ])('takes points %j, with %s between', (text) => {
    expect(pointsOf(text)).toEqual([
      { raw: 0, value: 4 },
      { raw: 10, value: 20 },
    ]);
  });

  it.each([
    [{ kind: 'linear', gain: 'much' }, 'gain', 'Give a number.'],
    [{ kind: 'linear', gain: '0' }, 'gain', 'gain of 0'],
    [{ kind: 'polynomial', coefficients: '1', from: '0', to: '1' }, 'coefficients', 'constant and the slope'],
    [{ kind: 'polynomial', coefficients: '1 2', from: '5', to: '1' }, 'from', 'begin below'],
    [{ kind: 'table', points: '0 1\n0 2' }, 'points', 'Line 2'],
    [{ kind: 'table', points: '0 x\n1 2' }, 'points', 'Line 1'],
    [{ kind: 'thermocouple', celsius: '' }, 'celsius', ''],
    [{ kind: 'platinum', r0Ohm: '-1' }, 'r0Ohm', ''],
    [{ calibratedOn: '' }, 'calibratedOn', ''],
    [{ expandedUncertainty: '0' }, 'expandedUncertainty', ''],
  ] as const)('%j has a fault at %s', (change, key, text) => {
    const { faults } = checkCalibration({ ...draft, ...change });
    expect(faults?.get(key), JSON.stringify([...(faults ?? [])])).toContain(text);
  });

  it('knows the field of what the server says', () => {
    expect(draftKeyOf('content.conversion.points[3].raw')).toBe('points');
    expect(draftKeyOf('content.conversion.coldJunction.channel')).toBe('junctionChannel');
    expect(draftKeyOf('content.dueOn')).toBe('dueOn');
  });

  // NIST ITS-90 Thermocouple Database (SRD 60): type K, 4.096 mV at 100 °C.
  it('is drawn as the published tables have it', () => {
    const conversion = readConversion({ ...draft, kind: 'thermocouple', type: 'K', celsius: '0' });
    const { raws, values } = previewCurve(conversion!, { min: 0, max: 100 }, 0);
    expect(raws.at(-1)).toBeCloseTo(4.096, 3);
    expect(values.at(-1)).toBeCloseTo(100, 1);
  });
});
