/**
 * Points of a trace as the API gives them: little-endian Float32 in base64.
 *
 * @example
 * decodePoints('AACAPwAAAMA=') // Float32Array [1, -2]
 */
export function decodePoints(base64: string): Float32Array {
  const text = atob(base64);
  const bytes = new DataView(new ArrayBuffer(text.length));
  for (let i = 0; i < text.length; i += 1) bytes.setUint8(i, text.charCodeAt(i));
  return Float32Array.from({ length: text.length / 4 }, (_, i) => bytes.getFloat32(4 * i, true));
}
