import { parentPort, workerData } from 'node:worker_threads';
import { normalQuantile } from '../../worker/engine/math/normal';
import { lossOfRow } from '../../worker/engine/losses/draw';
import { fillLaws, kindOfRow, makeLaws } from '../../worker/engine/losses/laws';
import { severityOf } from '../../worker/engine/losses/severity';
import { plainMemory } from '../../worker/engine/model/memory';
import type { PreparedTable } from '../../worker/engine/model/prepare';
import { philox, uniform52 } from '../../worker/engine/random/philox';

/** One law of a loss and the layers whose mean recovery is wanted. */
export interface DrawCase {
  readonly mean: number;
  readonly sd: number;
  /** NaN: lognormal. */
  readonly exposed: number;
  readonly layers: readonly { readonly limit: number; readonly attachment: number }[];
  readonly draws: number;
}
export interface DrawnMean {
  readonly mean: number;
  readonly standardError: number;
}

/** Draws a law by the engine's own sampler and answers each layer's mean recovery. */
function drawn({ mean, sd, exposed, layers, draws }: DrawCase, key: number): DrawnMean[] {
  const one = (x: number): Float64Array => Float64Array.of(x);
  const { kind, mayHaveTable } = kindOfRow(severityOf(mean, sd, exposed), draws);
  const source = { meanLoss: one(mean), sd: one(sd), exposedValue: one(exposed), firstRow: 0, lowestAttachment: -1, slot: Int32Array.of(mayHaveTable ? 0 : -1), draws: () => draws };
  const laws = makeLaws(1, mayHaveTable ? 1 : 0, plainMemory);
  fillLaws(laws, source, 0, 1);
  const table = { ...source, kind: Uint8Array.of(kind) } as unknown as PreparedTable;
  const words = new Uint32Array(4);
  const sums = new Float64Array(layers.length);
  const squares = new Float64Array(layers.length);
  for (let i = 0; i < draws; i += 1) {
    philox(words, i, 0, 2, 0, key, 77);
    const loss = lossOfRow(laws, table, 0, normalQuantile(uniform52(words[0] ?? 0, words[1] ?? 0)));
    for (let l = 0; l < layers.length; l += 1) {
      const { limit, attachment } = layers[l] ?? { limit: 0, attachment: 0 };
      const recovery = Math.min(Math.max(loss - attachment, 0), limit);
      sums[l] = (sums[l] ?? 0) + recovery;
      squares[l] = (squares[l] ?? 0) + recovery * recovery;
    }
  }
  return layers.map((_layer, l) => {
    const average = (sums[l] ?? 0) / draws;
    return { mean: average, standardError: Math.sqrt(Math.max((squares[l] ?? 0) / draws - average * average, 0) / draws) };
  });
}

parentPort?.postMessage((workerData as readonly DrawCase[]).map((one, i) => drawn(one, i + 1)));
