import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { crc16 } from './crc-16.js';
import { RtuFramer, rtuFrame } from './rtu-framing.js';

const bytes = (hex: string) => Buffer.from(hex.replace(/ /g, ''), 'hex');
/** Requests as they stand in the protocol's examples and public protocol tests (CRC recomputed by hand of one). */
const requests = [
  '11 01 00 13 00 25 0E 84',
  '11 02 00 C4 00 16 BA A9',
  '11 03 00 6B 00 03 76 87',
  '11 04 00 08 00 01 B2 98',
  '11 05 00 AC FF 00 4E 8B',
  '11 06 00 01 00 03 9A 9B',
  '11 0F 00 13 00 0A 02 CD 01 BF 0B',
  '11 10 00 01 00 02 04 00 0A 01 02 C6 F0',
];

describe('the frames of a serial line', () => {
  it('have the published check sum', () => {
    expect(crc16(Buffer.from('123456789'))).toBe(0x4b37);
    // Worked example of the serial line guide, V1.02 (from memory): 02 07 gives 41 12 on the line.
    expect(rtuFrame(2, bytes('07'))).toEqual(bytes('02 07 41 12'));
  });

  it.each(requests)('are known as soon as they are whole, in pieces or joined: %s', (hex) => {
    const frame = bytes(hex);
    for (let cut = 0; cut <= frame.length; cut += 1) {
      const framer = new RtuFramer();
      const found = [...framer.take(frame.subarray(0, cut)), ...framer.take(frame.subarray(cut))];
      expect(found).toEqual([{ unit: 0x11, pdu: frame.subarray(1, -2) }]);
      expect(framer.silence()).toBeNull();
    }
    expect(new RtuFramer().take(Buffer.concat([frame, frame]))).toHaveLength(2);
  });

  it('are left out where the check sum is wrong', () => {
    const framer = new RtuFramer();
    expect(framer.take(bytes('11 03 00 6B 00 03 76 88'))).toEqual([]);
    expect(framer.silence()).toBeNull();
    expect(framer.take(bytes('11 03 00 6B 00 03 76 87'))).toHaveLength(1);
  });

  it('are found again after any noise and a silence', () => {
    fc.assert(
      fc.property(fc.uint8Array({ maxLength: 300 }), fc.constantFrom(...requests), (noise, hex) => {
        const framer = new RtuFramer();
        framer.take(Buffer.from(noise));
        framer.silence();
        expect(framer.take(bytes(hex))).toHaveLength(1);
      }),
    );
  });

  it('of unknown functions end with the silence', () => {
    const framer = new RtuFramer();
    const frame = rtuFrame(0x11, bytes('42'));
    expect(framer.take(frame)).toEqual([]);
    expect(framer.silence()).toEqual({ unit: 0x11, pdu: bytes('42') });
  });
});
