import oracle from '@stdlib/math-base-special-exp';
import { exp } from './exp';

const UNIT = 2 ** -52;
/** A fixed walk over [0, 1). */
const spread = (n: number): number[] => Array.from({ length: n }, (_unused, i) => (i * 0.6180339887498949) % 1);

describe('the exponential of fixed bits', () => {
  it('agrees with an independent library within a unit of the last place', () => {
    const points = spread(20_000).flatMap((u) => [1416, 2, 0.5, 1e-3, 1e-8, 1e-17].map((size) => (u - 0.5) * size));
    const off = points.filter((x) => Math.abs(exp(x) - oracle(x)) > UNIT * oracle(x));
    expect(off).toEqual([]);
  });

  it('keeps to the ends of its domain', () => {
    expect([exp(710), exp(-746), exp(-745), exp(709.78), exp(0), exp(Infinity), exp(-Infinity), exp(Number.NaN)]).toEqual([Infinity, 0, 5e-324, oracle(709.78), 1, Infinity, 0, Number.NaN]);
  });
});
