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
  const found = new Map<Float64Array, Sorted>();
  const among = (values: Float64Array, rank: number): number => {
    const sorted = found.get(values) ?? new Sorted(values);
    found.set(values, sorted);
    return sorted.at(rank);
  };
  return ranks.map((rank) => {
    const place = bucketOfRank.get(rank);
    const values = place === undefined ? undefined : wanted.get(place.bucket);
    return place === undefined || values === undefined ? Number.NaN : among(values, rank - place.below);
  });
}

const FEW = 512;
const SLICES = 1024;

/** The values of one bucket, of which only the slices asked for are put in order, each by slices of its own. */
class Sorted {
  private ends = new Uint32Array(0);
  private slices: Float64Array;
  private readonly inner = new Map<number, Sorted>();

  constructor(values: Float64Array) {
    this.slices = values;
    let [least, most] = [values[0] ?? 0, values[0] ?? 0];
    for (let i = 0; i < values.length; i += 1) {
      const x = values[i] ?? 0;
      if (x < least) least = x;
      if (x > most) most = x;
    }
    // Many states are alike to the last bit, those without any loss above all.
    if (least === most) return;
    const scale = (SLICES - 1) / (most - least);
    if (values.length <= FEW || !(scale < Infinity)) values.sort();
    else this.slice(values, least, scale);
  }

  /** Slices rise with their values, whatever rounding does. */
  private slice(values: Float64Array, least: number, scale: number): void {
    const n = values.length;
    const sliceOf = new Uint16Array(n);
    const starts = new Uint32Array(SLICES + 1);
    for (let i = 0; i < n; i += 1) {
      const slice = Math.floor(((values[i] ?? 0) - least) * scale);
      sliceOf[i] = slice;
      starts[slice + 1] = (starts[slice + 1] ?? 0) + 1;
    }
    for (let i = 0; i < SLICES; i += 1) starts[i + 1] = (starts[i + 1] ?? 0) + (starts[i] ?? 0);
    this.ends = starts.slice(1);
    this.slices = new Float64Array(n);
    for (let i = 0; i < n; i += 1) {
      const slice = sliceOf[i] ?? 0;
      const at = starts[slice] ?? 0;
      this.slices[at] = values[i] ?? 0;
      starts[slice] = at + 1;
    }
  }

  at(rank: number): number {
    if (this.ends.length === 0) return this.slices[rank] ?? Number.NaN;
    let [low, high] = [0, SLICES - 1];
    while (low < high) {
      const middle = (low + high) >>> 1;
      if ((this.ends[middle] ?? 0) <= rank) low = middle + 1;
      else high = middle;
    }
    const from = low === 0 ? 0 : (this.ends[low - 1] ?? 0);
    const inner = this.inner.get(low) ?? new Sorted(this.slices.subarray(from, this.ends[low] ?? 0));
    this.inner.set(low, inner);
    return inner.at(rank - from);
  }
}
