const LEAST_EXPONENT = -1074;

/** 2 to the whole powers that a double has, from 2^−1074 to 2^1023; multiplying by one is exact unless it underflows. */
const POWERS = Float64Array.from({ length: 2098 }, (_unused, i) => {
  let power = 1;
  for (let e = 0; e < i + LEAST_EXPONENT; e += 1) power *= 2;
  for (let e = 0; e > i + LEAST_EXPONENT; e -= 1) power /= 2;
  return power;
});

/** 2^exponent for a whole exponent from −1074 to 1023. */
export function powerOfTwo(exponent: number): number {
  return POWERS[exponent - LEAST_EXPONENT] ?? 0;
}
