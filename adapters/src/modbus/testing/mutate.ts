/** A small seeded generator (mulberry32, public domain): the fuzz must be repeatable. */
export function seeded(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let mixed = Math.imul(state ^ (state >>> 15), state | 1);
    mixed ^= mixed + Math.imul(mixed ^ (mixed >>> 7), mixed | 61);
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 2 ** 32;
  };
}

/** Changes an answer in one to four ways that a wire or a broken device may: bits, bytes, length, order. */
export function mutate(bytes: Buffer, random: () => number): Buffer {
  const pick = (most: number): number => Math.floor(random() * most);
  let result = Buffer.from(bytes);
  for (let times = 1 + pick(4); times > 0; times -= 1) {
    const at = pick(result.length + 1);
    switch (pick(7)) {
      case 0:
      case 1:
        if (at < result.length) result[at]! ^= 1 << pick(8);
        break;
      case 2:
        if (at < result.length) result[at] = pick(256);
        break;
      case 3:
        result = result.subarray(0, at);
        break;
      case 4:
        result = Buffer.concat([result.subarray(0, at), Buffer.from([pick(256)]), result.subarray(at)]);
        break;
      case 5:
        result = Buffer.concat([result.subarray(0, at), result.subarray(at + 1 + pick(3))]);
        break;
      default:
        result = Buffer.concat([result, result.subarray(pick(result.length + 1))]);
    }
    result = Buffer.from(result);
  }
  return result;
}
