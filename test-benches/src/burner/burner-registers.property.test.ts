import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { burnerRegisterMap } from './burner-registers.js';
import { BurnerSimulation } from './burner-simulation.js';
import { ModbusException } from './modbus-face.js';

const unit = fc.constantFrom(1, 2, 247);
const address = fc.integer({ min: 0, max: 120 });

describe('the registers of the burner, for any request', () => {
  it('answer with words or a Modbus exception, and nothing that was refused has changed anything', () => {
    fc.assert(
      fc.property(
        unit,
        address,
        fc.array(fc.integer({ min: 0, max: 65_535 }), { minLength: 1, maxLength: 5 }),
        (where, at, values) => {
          const simulation = new BurnerSimulation({ seed: 1, isNoisy: true, isDrifting: true });
          const written: number[] = [];
          const map = burnerRegisterMap(simulation, (_unit, register) => written.push(register));
          const before = simulation.now;
          try {
            map.write(where, at, values);
            expect(written).toHaveLength(values.length);
          } catch (error) {
            expect(error).toBeInstanceOf(ModbusException);
            expect(written).toEqual([]);
            expect(simulation.now).toBe(before);
          }
          try {
            const words = map.read(where, at, values.length);
            expect(words).toHaveLength(values.length);
            for (const word of words)
              expect(Number.isInteger(word) && word >= 0 && word <= 65_535).toBe(true);
          } catch (error) {
            expect(error).toBeInstanceOf(ModbusException);
          }
        },
      ),
    );
  });
});
