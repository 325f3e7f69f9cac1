const M0 = 0xd2511f53;
const M1 = 0xcd9e8d57;
const W0 = 0x9e3779b9;
const W1 = 0xbb67ae85;

function high(a: number, b: number): number {
  const aLow = a & 0xffff;
  const aHigh = a >>> 16;
  const bLow = b & 0xffff;
  const bHigh = b >>> 16;
  const middle = aHigh * bLow + ((aLow * bLow) >>> 16);
  const other = aLow * bHigh + (middle & 0xffff);
  return (aHigh * bHigh + (middle >>> 16) + (other >>> 16)) >>> 0;
}

/**
 * Philox-4x32-10, a counter-based generator: a keyed bijection of counters, so that any number is had without the ones
 * before it. Source: J. K. Salmon, M. A. Moraes, R. O. Dror, D. E. Shaw (2011), Parallel random numbers: as easy as 1, 2, 3,
 * SC11. Writes four unsigned 32-bit words into `out`.
 */
export function philox(out: Uint32Array, c0: number, c1: number, c2: number, c3: number, key0: number, key1: number): void {
  let x0 = c0 >>> 0;
  let x1 = c1 >>> 0;
  let x2 = c2 >>> 0;
  let x3 = c3 >>> 0;
  let k0 = key0 >>> 0;
  let k1 = key1 >>> 0;
  for (let round = 0; round < 10; round += 1) {
    const high0 = high(M0, x0);
    const low0 = Math.imul(M0, x0) >>> 0;
    const high1 = high(M1, x2);
    const low1 = Math.imul(M1, x2) >>> 0;
    x0 = (high1 ^ x1 ^ k0) >>> 0;
    x1 = low1;
    x2 = (high0 ^ x3 ^ k1) >>> 0;
    x3 = low0;
    k0 = (k0 + W0) >>> 0;
    k1 = (k1 + W1) >>> 0;
  }
  out[0] = x0;
  out[1] = x1;
  out[2] = x2;
  out[3] = x3;
}

/** A uniform number strictly between 0 and 1 from 52 of 64 random bits; half a step off 0, and no rounding up to 1. */
export function uniform52(highWord: number, lowWord: number): number {
  return ((highWord >>> 0) * 1_048_576 + (lowWord >>> 12) + 0.5) / 4_503_599_627_370_496;
}

/** A uniform number strictly between 0 and 1 from 32 random bits. */
export function uniform32(word: number): number {
  return ((word >>> 0) + 0.5) / 4_294_967_296;
}
