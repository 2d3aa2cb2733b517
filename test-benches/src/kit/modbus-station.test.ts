import { describe, expect, it } from 'vitest';
import { bowlOverModbus, bowlRegisters } from './bowl-bench.fixture.js';
import { makeFaultedModel } from './make-faulted-model.js';
import { ModbusStation } from './modbus-station.js';

function station() {
  const model = makeFaultedModel(bowlOverModbus, { seed: 1, isNoisy: false, isDrifting: false }, {});
  const writes: string[] = [];
  const refused: number[] = [];
  const served = new ModbusStation(bowlRegisters, null, model, () => {}, {
    onWrite: (unit, { name, register, value, engineering }) =>
      writes.push(`${unit}.${register}: ${value} = ${name} ${engineering}`),
    onRefused: (_unit, register) => refused.push(register),
  });
  /** Asks in hexadecimal, unit 17 where none is given, and gives the answer in hexadecimal. */
  const ask = (hex: string, unit = 17): string => {
    const reply = served.answer(unit, Buffer.from(hex.replace(/ /g, ''), 'hex'));
    if (reply.kind === 'silence') return 'silence';
    return `${reply.pdu.toString('hex')}${reply.isSpoiled ? ' spoiled' : ''}`;
  };
  return { model, ask, writes, refused };
}

describe('a station, by the Modbus application protocol V1.1b3', () => {
  it('writes and reads coils, discrete inputs, holding and input registers', () => {
    const { ask, writes } = station();
    // The example of function 05 in the protocol: coil 172 on, address 00AC.
    expect(ask('05 00AC FF00')).toBe('0500acff00');
    expect(ask('01 00AC 0001')).toBe('010101');
    expect(ask('02 00C4 0001')).toBe('020101');
    expect(ask('06 0000 FFF6')).toBe('060000fff6');
    expect(ask('03 0000 0001')).toBe('0302fff6');
    expect(ask('0F 00AC 0001 01 00')).toBe('0f00ac0001');
    expect(ask('10 0000 0001 02 000A')).toBe('1000000001');
    expect(writes).toEqual([
      '17.172: 1 = lamp 1',
      '17.0: 65526 = place -1',
      '17.172: 0 = lamp 0',
      '17.0: 10 = place 1',
    ]);
  });

  it('masks a word as the example of function 22 does', () => {
    const { ask, writes } = station();
    // Current 12, AND F2, OR 25: result 17 (protocol, section 6.16).
    ask('06 0000 0012');
    expect(ask('16 0000 00F2 0025')).toBe('16000000f20025');
    expect(ask('03 0000 0001')).toBe('03020017');
    expect(writes).toHaveLength(2);
  });

  it('writes before it reads in function 23', () => {
    const { ask } = station();
    expect(ask('17 0000 0001 0000 0001 02 0011')).toBe('17020011');
  });

  it('gives two words with the high one first, and blocks of a trace of one moment', () => {
    const { ask, model } = station();
    ask('06 0000 001E');
    model.advanceTo(1);
    expect(ask('04 0008 0002')).toBe('040441100000'); // 9.0
    expect(ask('04 000A 0002')).toBe('04040000000a');
    expect(ask('04 0064 0002')).toBe('0404000a000b');
    model.advanceTo(2);
    // Later points are of the picture that the first register began.
    expect(ask('04 0066 0002')).toBe('0404000c000d');
    expect(ask('04 0064 0001')).toBe('04020014');
  });

  it.each([
    ['an unknown function', '42', 'c201'],
    ['an address outside the map', '03 0001 0001', '8302'],
    ['more registers than fit', '03 0000 007E', '8303'],
    ['none', '04 0008 0000', '8403'],
    ['a request that is cut short', '03 00', '8303'],
    ['a coil that is neither on nor off', '05 00AC 1234', '8503'],
    ['a value out of its range', '06 0000 01F5', '8603'],
    ['a wrong byte count', '10 0000 0001 03 000A', '9003'],
    ['a write to what is only read', '0F 00C4 0001 01 01', '8f02'],
    ['a write across the end of the map', '10 0000 0002 04 0001 0002', '9002'],
  ])('refuses %s', (_what, request, answer) => {
    const { ask, writes } = station();
    expect(ask(request)).toBe(answer);
    expect(writes).toEqual([]);
  });

  it('answers for the instructor and for no other unit', () => {
    const { ask, refused } = station();
    expect(ask('03 0000 0001', 4)).toBe('830b');
    expect(ask('06 0064 0004', 247)).toBe('0600640004');
    expect(ask('03 0000 0001')).toBe('silence');
    expect(ask('03 0064 0001', 247)).toBe('03020004');
    ask('06 0064 0000', 247);
    ask('06 0000 01F5');
    expect(refused).toEqual([0]);
  });

  it('tells nobody how good it could be', () => {
    const { ask } = station();
    for (let address = 0; address < 300; address += 1) {
      if (address === 6 || address === 7 || address === 100) continue;
      expect(ask(`03 ${address.toString(16).padStart(4, '0')} 0001`, 247)).toBe('8302');
    }
  });

  it('spoils, refuses and fails as an instructor says', () => {
    const { ask } = station();
    ask('06 0064 0005', 247);
    expect(ask('03 0000 0001')).toBe('03020000 spoiled');
    ask('06 0064 0007', 247);
    expect(ask('03 0000 0001')).toBe('8306');
    ask('06 0064 0002', 247);
    expect([ask('04 0008 0002'), ask('03 0000 0001'), ask('04 000A 0002')]).toEqual([
      '8404',
      '03020000',
      '040400000000',
    ]);
    expect(ask('06 0064 0063', 247)).toBe('8603');
  });
});
