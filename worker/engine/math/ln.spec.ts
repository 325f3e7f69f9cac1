import oracle from '@stdlib/math-base-special-ln';
import { ln } from './ln';

const UNIT = 2 ** -52;
/** A fixed walk over [0, 1). */
const spread = (n: number): number[] => Array.from({ length: n }, (_unused, i) => (i * 0.6180339887498949) % 1);

describe('the logarithm of fixed bits', () => {
  it('agrees with an independent library within a unit of the last place', () => {
    const points = [...spread(20_000).map((u) => u * 3), ...spread(20_000).map((u) => 1 + (u - 0.5) * 1e-6), ...spread(20_000).map((u) => 10 ** ((u - 0.5) * 600))];
    const off = points.filter((x) => Math.abs(ln(x) - oracle(x)) > UNIT * Math.abs(oracle(x)));
    expect(off).toEqual([]);
  });

  it('keeps to the ends of its domain', () => {
    expect([ln(0), ln(1), ln(Infinity), ln(-1), ln(Number.NaN)]).toEqual([-Infinity, 0, Infinity, Number.NaN, Number.NaN]);
    expect([ln(5e-324), ln(Number.MAX_VALUE)]).toEqual([oracle(5e-324), oracle(Number.MAX_VALUE)]);
  });
});
