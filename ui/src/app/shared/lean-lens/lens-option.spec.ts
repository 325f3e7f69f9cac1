import type { LensBin } from '@leanyear/contract/runs';
import type { Ink } from '../chart/ink';
import { leftmost, lensOption } from './lens-option';

const bin = (shareFrom: number, shareTo: number, hunger: number, payoff: number): LensBin => ({
  shareFrom,
  shareTo,
  hunger,
  meanCapital: 1,
  payoff: [payoff],
  product: [hunger * payoff],
  plain: [payoff],
});
const BINS = [bin(0, 0.001, 8, 1), bin(0.001, 0.1, 2, 0.5), bin(0.1, 1, 0.9, 0)];
const INK = { layers: ['#012345'], figures: 'mono', words: 'sans' } as unknown as Ink;

interface Series {
  readonly name: string;
  readonly data: readonly (readonly [number, number])[];
}

describe('the drawing of the lean lens', () => {
  it('begins where a logarithmic axis can, and ends at all states', () => {
    expect(leftmost(BINS)).toBe(0.0005);
    const { series } = lensOption(INK, BINS, [{ name: 'Top', index: 0 }]) as { series: readonly Series[] };
    expect(series.map((one) => one.name)).toEqual([
      'Hunger',
      'Top: payoff',
      'Top: product',
      'Top: without hunger',
    ]);
    expect(series[0]?.data).toEqual([
      [0.0005, 8],
      [0.001, 2],
      [0.1, 0.9],
      [1, 0.9],
    ]);
    expect(series[2]?.data).toEqual([
      [0.0005, 8],
      [0.001, 1],
      [0.1, 0],
      [1, 0],
    ]);
  });
});
