import { normalQuantile } from '../../../worker/engine/math/normal';
import { philox, uniform52 } from '../../../worker/engine/random/philox';

/** Independent standard normal scores by the engine's generator, the same each time. */
export function normalScores(count: number): number[] {
  const words = new Uint32Array(4);
  return Array.from({ length: count }, (_unused, i) => {
    philox(words, i, 0, 0, 0, 20_260_801, 7);
    return normalQuantile(uniform52(words[0] ?? 0, words[1] ?? 0));
  });
}
