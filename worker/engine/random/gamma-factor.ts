import { exp } from '../math/exp';
import { ln } from '../math/ln';
import { normalQuantile } from '../math/normal';
import { PURPOSE } from './keys';
import { philox, uniform52 } from './philox';

/**
 * Gamma variable of mean 1 and the given shape for one state, by squeeze-free rejection on a cubed normal.
 * Source: G. Marsaglia, W. W. Tsang (2000), A simple method for generating gamma variables, ACM TOMS 26(3); below shape 1
 * its boost by a power of a uniform.
 * @param words scratch of four words
 */
export function gammaFactor(words: Uint32Array, shape: number, state: number, key0: number, key1: number): number {
  const boosted = shape < 1 ? shape + 1 : shape;
  const d = boosted - 1 / 3;
  const c = 1 / Math.sqrt(9 * d);
  for (let attempt = 0; ; attempt += 1) {
    philox(words, state, attempt, PURPOSE.group, 0, key0, key1);
    const x = normalQuantile(uniform52(words[0] ?? 0, words[1] ?? 0));
    const u = uniform52(words[2] ?? 0, words[3] ?? 0);
    const root = 1 + c * x;
    if (root <= 0) continue;
    const v = root * root * root;
    if (ln(u) >= 0.5 * x * x + d - d * v + d * ln(v)) continue;
    if (shape >= 1) return (d * v) / shape;
    philox(words, state, attempt, PURPOSE.group, 1, key0, key1);
    return (d * v * exp(ln(uniform52(words[0] ?? 0, words[1] ?? 0)) / shape)) / shape;
  }
}
