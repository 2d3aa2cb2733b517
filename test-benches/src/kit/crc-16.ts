/**
 * CRC of Modbus on a serial line, sent low byte first.
 *
 * @source Modbus over serial line, V1.02, section 2.5.1.2: initial FFFF, polynomial A001, reflected
 * @example crc16(Buffer.from('123456789')) // 0x4b37
 */
export function crc16(bytes: Uint8Array): number {
  let crc = 0xffff;
  for (const byte of bytes) {
    crc ^= byte;
    for (let bit = 0; bit < 8; bit += 1) crc = crc & 1 ? (crc >> 1) ^ 0xa001 : crc >> 1;
  }
  return crc;
}
