/** Remainders of all bytes for the polynomial A001 (8005, reflected). */
const remainders = Uint16Array.from({ length: 256 }, (_, byte) => {
  let crc = byte;
  for (let bit = 0; bit < 8; bit += 1) crc = crc & 1 ? (crc >>> 1) ^ 0xa001 : crc >>> 1;
  return crc;
});

/**
 * Checksum of an RTU frame. On the wire its low byte comes first, and a whole frame with it has the checksum 0.
 *
 * @source MODBUS over Serial Line V1.02, 6.2.2
 * @realtime safe: allocates nothing
 * @example
 * crc16(Buffer.from('123456789')) // 0x4b37
 */
export function crc16(bytes: Uint8Array, from = 0, to = bytes.length): number {
  let crc = 0xffff;
  for (let at = from; at < to; at += 1) {
    crc = (crc >>> 8) ^ (remainders[(crc ^ (bytes[at] ?? 0)) & 0xff] ?? 0);
  }
  return crc;
}

/** Writes the checksum of all but the last two bytes into those two. */
export function sealFrame(frame: Buffer): Buffer {
  const end = frame.length - 2;
  frame.writeUInt16LE(crc16(frame, 0, end), end);
  return frame;
}
