import { describe, expect, it } from 'vitest';
import { bowlOverModbus } from './bowl-bench.fixture.js';
import { commonFaults, parsePlannedFault } from './faults.js';
import { makeFaultedModel } from './make-faulted-model.js';

const kinds = [...Object.keys(commonFaults), 'bump'];
const parse = (text: string) => parsePlannedFault(text, kinds);

/** The bowl, quiet, with faults as they are given on the command line. */
function bowl(...texts: string[]) {
  const told: [number, string, boolean][] = [];
  const model = makeFaultedModel(
    bowlOverModbus,
    { seed: 1, isNoisy: false, isDrifting: false },
    {},
    texts.map(parse),
  );
  model.onFault = (fault, isOn) => told.push([model.tS, fault, isOn]);
  return { model, told };
}

describe('the grammar of planned faults', () => {
  it.each([
    ['freeze', { kind: 'freeze', of: null, fromS: 0, untilS: Infinity }],
    ['freeze@60', { kind: 'freeze', of: null, fromS: 60, untilS: Infinity }],
    ['silence@30:5', { kind: 'silence', of: null, fromS: 30, untilS: 35 }],
    ['nan.depth@1.5:0.5', { kind: 'nan', of: 'depth', fromS: 1.5, untilS: 2 }],
    ['reboot@10', { kind: 'reboot', of: null, fromS: 10, untilS: 13 }],
  ])('reads %s', (text, fault) => {
    expect(parse(text)).toEqual(fault);
  });

  it.each(['', 'freeze@', 'freeze@-1', 'freeze@1:', 'freeze 3', 'freeze@1:2:3'])('refuses "%s"', (text) => {
    expect(() => parse(text)).toThrow('KIND[.VALUE][@FROM[:FOR]]');
  });

  it('names the faults that there are', () => {
    expect(() => parse('flood')).toThrow('choose nan, exception, freeze');
  });
});

describe('the instruments of a bench with faults', () => {
  it('stand still from a time to a time, the controller does not', () => {
    const { model, told } = bowl('freeze@1:2');
    model.advanceTo(0.9);
    model.write('place', 3);
    // Across the beginning in one go: what they showed then is what they keep.
    model.advanceTo(2.5);
    expect(model.read('depth')).toBe(9);
    model.write('place', 4);
    model.advanceTo(2.9);
    expect([model.read('depth'), model.read('place')]).toEqual([9, 4]);
    expect(model.readTrace('wall')[0]).toBeCloseTo(1, 9);
    expect(model.read('age')).toBeCloseTo(2.9, 9);
    model.advanceTo(3.5);
    expect(model.read('depth')).toBe(16);
    expect(told.map(([tS, ...rest]) => [Math.round(tS * 10) / 10, ...rest])).toEqual([
      [1, 'freeze', true],
      [3, 'freeze', false],
    ]);
  });

  it('lose the value that is named, or the usual one', () => {
    const { model } = bowl('nan.wall@1:1', 'nan@2:1');
    model.advanceTo(1);
    expect([...model.readTrace('wall')]).toEqual([NaN, NaN, NaN, NaN]);
    expect(model.read('depth')).toBe(0);
    model.advanceTo(2);
    expect(model.read('depth')).toBeNaN();
    expect(model.readTrace('wall')[0]).toBeCloseTo(2, 9);
  });

  it('restart once, and are away for three seconds', () => {
    const { model } = bowl('reboot@1');
    model.write('place', 5);
    model.advanceTo(1);
    expect([model.model.reboots, model.isActive('reboot')]).toEqual([1, true]);
    model.advanceTo(3.9);
    expect(model.isActive('reboot')).toBe(true);
    model.advanceTo(4);
    expect([model.model.reboots, model.isActive('reboot')]).toEqual([1, false]);
  });

  it('play the faults of their own bench, by plan and by hand', () => {
    const { model, told } = bowl('bump@1');
    model.advanceTo(5);
    expect(model.model.bumps).toBe(1);
    expect(model.setFaultByHand(kinds.indexOf('bump') + 1)).toBe(true);
    expect(model.model.bumps).toBe(2);
    expect(model.setFaultByHand(0)).toBe(true);
    expect(model.setFaultByHand(99)).toBe(false);
    expect(told.slice(-2).map(([, fault, isOn]) => [fault, isOn])).toEqual([
      ['bump', true],
      ['bump', false],
    ]);
  });

  it('come back by themselves from a restart that an instructor asked for', () => {
    const { model } = bowl();
    model.advanceTo(2);
    model.setFaultByHand(6);
    expect([model.faultByHand, model.model.reboots, model.isActive('reboot')]).toEqual([0, 1, true]);
    model.advanceTo(5);
    expect(model.isActive('reboot')).toBe(false);
  });
});
