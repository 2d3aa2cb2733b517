const alphabet = 'ABCDEFGHIJKLMNOPQRSTUVWXYZ234567';

/** Reads base32 as an authenticator does; spaces do not matter. */
export function fromBase32(text: string): Buffer {
  const bits = [...text.replace(/\s/g, '')]
    .map((character) => alphabet.indexOf(character).toString(2).padStart(5, '0'))
    .join('');
  const bytes = bits.match(/.{8}/g) ?? [];
  return Buffer.from(bytes.map((byte) => Number.parseInt(byte, 2)));
}
