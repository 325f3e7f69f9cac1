/** What a random number is for: numbers of different purposes never meet. Values are for ever. */
export const PURPOSE = { occurrence: 1, table: 2, group: 3 } as const;

function rotate(value: number, by: number): number {
  return (value << by) | (value >>> (32 - by));
}

/**
 * MurmurHash3, 32-bit form (A. Appleby, public domain), over the two bytes of each UTF-16 code unit, low byte first.
 */
export function murmur32(text: string, seed: number): number {
  let hash = seed | 0;
  const units = text.length;
  const whole = units - (units % 2);
  const mix = (word: number): number => Math.imul(rotate(Math.imul(word, 0xcc9e2d51), 15), 0x1b873593);
  for (let at = 0; at < whole; at += 2) {
    hash ^= mix(text.charCodeAt(at) | (text.charCodeAt(at + 1) << 16));
    hash = (Math.imul(rotate(hash, 13), 5) + 0xe6546b64) | 0;
  }
  if (whole < units) hash ^= mix(text.charCodeAt(whole));
  hash ^= units * 2;
  hash = Math.imul(hash ^ (hash >>> 16), 0x85ebca6b);
  hash = Math.imul(hash ^ (hash >>> 13), 0xc2b2ae35);
  return (hash ^ (hash >>> 16)) >>> 0;
}

/**
 * Key of the random numbers of one named thing: of the grid's seed, the lineage of its file and its own name, never of a
 * row number or a database id, so that it is the same in every version of the file.
 * @param seed sixteen hexadecimal digits
 */
export function streamKey(seed: string, lineage: string, name: string): { key0: number; key1: number } {
  const text = `${lineage}\u0000${name}`;
  return {
    key0: murmur32(text, Number.parseInt(seed.slice(0, 8), 16)),
    key1: murmur32(text, Number.parseInt(seed.slice(8, 16), 16) ^ 0x5bd1e995),
  };
}
