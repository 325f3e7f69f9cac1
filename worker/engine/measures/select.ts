const BUCKETS = 65_536;
const asDouble = new Float64Array(1);
const asWords = new Uint32Array(asDouble.buffer);
asDouble[0] = 1;
/** Where the word with sign and exponent lies: it depends on the order of bytes of the machine. */
const HIGH_WORD = asWords[1] === 0x3ff00000 ? 1 : 0;

/** First sixteen bits of a double, turned so that they rise with it. */
function bucketOf(highWord: number): number {
  const top = highWord >>> 16;
  return top >= 0x8000 ? 0xffff - top : top + 0x8000;
}

/**
 * The r-th smallest of a column for each rank r, counted from 0, without sorting it: doubles are counted by their first
 * sixteen bits, and only the buckets that hold a rank are sorted.
 * @param ranks whole numbers from 0 to column length − 1, in any order
 */
export function selectRanks(column: Float64Array, ranks: readonly number[]): number[] {
  const words = new Uint32Array(column.buffer, column.byteOffset, 2 * column.length);
  const counts = new Uint32Array(BUCKETS);
  for (let i = HIGH_WORD; i < words.length; i += 2) {
    const bucket = bucketOf(words[i] ?? 0);
    counts[bucket] = (counts[bucket] ?? 0) + 1;
  }
  const bucketOfRank = new Map<number, { bucket: number; below: number }>();
  const rising = [...ranks].sort((a, b) => a - b);
  let next = 0;
  let below = 0;
  for (let bucket = 0; bucket < BUCKETS && next < rising.length; bucket += 1) {
    const above = below + (counts[bucket] ?? 0);
    for (; next < rising.length && (rising[next] ?? 0) < above; next += 1) bucketOfRank.set(rising[next] ?? 0, { bucket, below });
    below = above;
  }
  const wanted = new Map<number, Float64Array>();
  for (const { bucket } of bucketOfRank.values()) wanted.set(bucket, new Float64Array(counts[bucket] ?? 0));
  const slots = new Int32Array(BUCKETS).fill(-1);
  const members = [...wanted].map(([bucket, values], slot) => {
    slots[bucket] = slot;
    return values;
  });
  const filled = new Uint32Array(members.length);
  for (let i = 0; i < column.length; i += 1) {
    const slot = slots[bucketOf(words[2 * i + HIGH_WORD] ?? 0)] ?? -1;
    if (slot < 0) continue;
    const values = members[slot];
    const at = filled[slot] ?? 0;
    if (values !== undefined) values[at] = column[i] ?? 0;
    filled[slot] = at + 1;
  }
  for (const values of members) values.sort();
  return ranks.map((rank) => {
    const place = bucketOfRank.get(rank);
    return place === undefined ? Number.NaN : (wanted.get(place.bucket)?.[rank - place.below] ?? Number.NaN);
  });
}
