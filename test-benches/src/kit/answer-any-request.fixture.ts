import fc from 'fast-check';
import { expect } from 'vitest';
import type { BenchDefinition } from './bench-definition.js';
import type { BenchModel } from './bench-model.js';
import { makeFaultedModel } from './make-faulted-model.js';
import { ModbusStation } from './modbus-station.js';

/** What the wire shows of a model, traces left out. */
function shownBy(model: BenchModel): number[] {
  return model.values.filter(({ points }) => points === 1).map(({ name }) => model.read(name));
}

/**
 * For any request to a bench: the answer is of its function or an exception, and what was refused has changed
 * nothing and is not logged as a write.
 */
export function answerAnyRequest<M extends BenchModel>(
  definition: BenchDefinition<M>,
  numRuns: number,
): void {
  const { wire } = definition;
  if (wire.kind === 'serial-text') throw new Error('A bench with commands has no registers.');
  const word = fc.integer({ min: 0, max: 0xffff });
  const requests = fc.record({
    unit: fc.constantFrom(wire.registers.unit ?? 1, 2, 247),
    code: fc.constantFrom(1, 2, 3, 4, 5, 6, 15, 16, 22, 23, 43, 0),
    address: fc.oneof(fc.integer({ min: 0, max: 120 }), word),
    words: fc.array(word, { minLength: 0, maxLength: 8 }),
    isWellFormed: fc.boolean(),
  });
  fc.assert(
    fc.property(requests, ({ unit, code, address, words, isWellFormed }) => {
      const model = makeFaultedModel(definition, { seed: 1, isNoisy: true, isDrifting: true }, {});
      const written: string[] = [];
      const station = new ModbusStation(wire.registers, null, model, () => {}, {
        onWrite: (_unit, { name }) => written.push(name),
        onRefused: () => {},
      });
      const before = shownBy(model.model);
      const reply = station.answer(unit, pduOf(code, address, words, isWellFormed));
      if (reply.kind === 'silence') throw new Error('A bench without faults answers.');
      const isRefused = reply.pdu[0] === (code | 0x80);
      if (!isRefused) expect(reply.pdu[0]).toBe(code);
      else {
        expect(reply.pdu).toHaveLength(2);
        expect([1, 2, 3, 4, 11]).toContain(reply.pdu[1]);
        expect(written).toEqual([]);
        expect(shownBy(model.model)).toEqual(before);
      }
    }),
    { numRuns },
  );
}

function pduOf(code: number, address: number, words: number[], isWellFormed: boolean): Buffer {
  const body = words.flatMap((word) => [word >> 8, word & 0xff]);
  const head = [code, address >> 8, address & 0xff];
  if (!isWellFormed) return Buffer.from([...head, ...body]);
  if (code === 16) return Buffer.from([...head, 0, words.length, 2 * words.length, ...body]);
  return Buffer.from([...head, ...[...body, 0, 1, 0, 1].slice(0, code === 22 ? 4 : 2)]);
}
