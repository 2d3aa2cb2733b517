import { describe, expect, it } from 'vitest';
import { bowlOverText } from './bowl-bench.fixture.js';
import { makeFaultedModel } from './make-faulted-model.js';
import { TextStation } from './text-station.js';

function station() {
  const model = makeFaultedModel(bowlOverText, { seed: 1, isNoisy: false, isDrifting: false }, {});
  const { wire } = bowlOverText;
  if (wire.kind !== 'serial-text') throw new Error('The bowl has no commands.');
  const log: string[] = [];
  const served = new TextStation(wire.commands, model, () => {}, {
    onWrite: (name, engineering, command) => log.push(`${name}=${engineering} by ${command}`),
    onRefused: (command) => log.push(`refused ${command}`),
  });
  const ask = (line: string) => served.answer(line);
  ask('*CLS');
  return { model, ask, log };
}

describe('a station with commands', () => {
  it('knows long and short forms in any case of letters', () => {
    const { ask, log } = station();
    for (const form of ['SOUR:PLAC 1.5', 'SOURce:PLACe 1.5', 'source:plac 1.5', ':SOUR:PLACE 1.5'])
      expect(ask(form)).toBeNull();
    expect(ask('SOUR:PLAC?')).toBe('1.50');
    expect(ask('SOURC:PLAC?')).toBeNull();
    expect(ask('SYST:ERR?')).toBe('-113,"Undefined header"');
    expect(log).toHaveLength(4);
  });

  it('answers several commands of a line together, and a trace point by point', () => {
    const { ask, model } = station();
    ask('SOUR:PLAC 2; *OPC');
    model.advanceTo(1);
    expect(ask('MEAS:DEPT?;*ESR?;TRAC:WALL?')).toBe('4.000;1;1.0,1.1,1.2,1.3');
  });

  // Checked against another implementation of SCPI 1999: a bad header sets ESR 32 and queues −113.
  it.each([
    ['FOO', 32, '-113,"Undefined header"'],
    ['*ESE 0,1', 32, '-108,"Parameter not allowed"'],
    ['SOUR:PLAC', 32, '-109,"Missing parameter"'],
    ['SOUR:PLAC deep', 32, '-120,"Numeric data error"'],
    ['SOUR:PLAC 51', 16, '-222,"Data out of range"'],
    ['MEAS:DEPT 1', 32, '-113,"Undefined header"'],
  ])('refuses %s with event status %i and %s', (command, esr, error) => {
    const { ask, log } = station();
    expect(ask(command)).toBeNull();
    expect(ask('*ESR?')).toBe(String(esr));
    expect(ask('*ESR?')).toBe('0');
    expect(ask('SYST:ERR?')).toBe(error);
    expect(ask('SYST:ERR?')).toBe('0,"No error"');
    expect(log).toEqual([`refused ${command}`]);
  });

  it('keeps common commands as IEEE 488.2 has them', () => {
    const { ask, model } = station();
    expect(ask('*IDN?')?.split(',')).toHaveLength(4);
    expect([ask('*OPC?'), ask('SYST:VERS?'), ask('*TST?')]).toEqual(['1', '1999.0', '0']);
    ask('*ESE 32;*SRE 32;FOO');
    // Queue not empty 4, event summary 32, service request 64.
    expect(ask('*STB?')).toBe('100');
    ask('*RST');
    expect(model.model.reboots).toBe(1);
  });

  it('says that its queue is full', () => {
    const { ask } = station();
    for (let i = 0; i < 20; i += 1) ask('FOO');
    const errors = Array.from({ length: 17 }, () => ask('SYST:ERR?'));
    expect(errors.slice(14)).toEqual(['-113,"Undefined header"', '-350,"Queue overflow"', '0,"No error"']);
  });

  it('plays faults, which only the instructor can end', () => {
    const { ask } = station();
    ask('SYST:FAUL 1');
    expect(ask('MEAS:DEPT?')).toBe('9.91E37');
    ask('SYST:FAUL 2');
    expect([ask('MEAS:DEPT?'), ask('SYST:ERR?')]).toEqual([null, '-240,"Hardware error"']);
    ask('SYST:FAUL 4');
    expect(ask('*IDN?')).toBeNull();
    expect(ask('SYSTEM:FAULT?')).toBe('4');
    ask('SYST:FAUL 5');
    expect(ask('SOUR:PLAC?')).not.toBe('0.00');
    ask('SYST:FAUL 0');
    expect(ask('SOUR:PLAC?')).toBe('0.00');
  });
});
