import { powerOfTwo } from './powers-of-two';

/* The reduction and the polynomial are those of fdlibm's e_exp.c:
 * Copyright (C) 2004 by Sun Microsystems, Inc. All rights reserved.
 * Permission to use, copy, modify, and distribute this software is freely granted, provided that this notice is preserved. */
const LN2_HIGH = 6.93147180369123816490e-1;
const LN2_LOW = 1.90821492927058770002e-10;
const INVERSE_LN2 = 1.44269504088896338700;
const P1 = 1.66666666666666019037e-1;
const P2 = -2.77777777770155933842e-3;
const P3 = 6.61375632143793436117e-5;
const P4 = -1.65339022054652515390e-6;
const P5 = 4.13813679705723846039e-8;

const OVERFLOW = 709.782712893384;
const UNDERFLOW = -745.1332191019411;

/**
 * e^x, within one unit of the last place and of the same bits everywhere, which Math.exp does not promise. Our own port for
 * the same reason as `ln`: within the engine it takes a fifth of the library's time. Any x.
 */
export function exp(x: number): number {
  if (!(x <= OVERFLOW)) return x === x ? Infinity : x;
  if (x < UNDERFLOW) return 0;
  const k = Math.floor(x * INVERSE_LN2 + 0.5);
  const high = x - k * LN2_HIGH;
  const low = k * LN2_LOW;
  const r = high - low;
  const t = r * r;
  const c = r - t * (P1 + t * (P2 + t * (P3 + t * (P4 + t * P5))));
  const y = 1 - (low - (r * c) / (2 - c) - high);
  // Two factors at the ends: 2^1024 is no double, and a double below 2^−1022 is rounded once only.
  if (k > -1022 && k < 1024) return y * powerOfTwo(k);
  return k === 1024 ? y * 2 * powerOfTwo(1023) : y * powerOfTwo(k + 1000) * powerOfTwo(-1000);
}
