import fc from 'fast-check';
import { RETURN_PERIODS, exceedance } from './exceedance';

/** Uniform numbers for samples (G. Marsaglia, Xorshift RNGs, 2003). */
function uniforms(seed: number): () => number {
  let x = seed | 1;
  return () => {
    x ^= x << 13;
    x ^= x >>> 17;
    x ^= x << 5;
    return ((x >>> 0) + 0.5) / 4_294_967_296;
  };
}

/** By sorting: the (S/N + 1)-th largest, and on it N times the mean excess. */
function bySorting(figures: readonly number[], years: number): { value: number; tailValue: number } {
  const falling = [...figures].sort((a, b) => b - a);
  const value = falling[Math.floor(figures.length / years)] ?? Number.NaN;
  const excess = figures.reduce((sum, x) => sum + Math.max(x - value, 0), 0);
  return { value, tailValue: value + (years * excess) / figures.length };
}

const close = (a: number | null, b: number, scale: number): boolean =>
  a !== null && Math.abs(a - b) <= 1e-12 * scale;

describe('exceedance', () => {
  it('takes the (S/N + 1)-th largest, and the mean of the worst S/N years (own arithmetic)', () => {
    // 1 to 1000: the 101st largest is 900, and the mean of 901 to 1000 is 950.5.
    const figures = Float64Array.from({ length: 1000 }, (_unused, i) => ((i * 617) % 1000) + 1);
    const [ten, hundred] = exceedance(figures, [10, 100]);
    expect(ten).toMatchObject({ years: 10, value: 900, tailValue: expect.closeTo(950.5, 9) as number });
    expect(hundred).toMatchObject({ years: 100, value: 990, tailValue: expect.closeTo(995.5, 9) as number });
    // One binomial deviation of 100 years in 1000 is √(100·0.9) = 9.49, rounded 9 ranks to either side.
    expect(ten?.valueError).toBe(9);
    // √(10·0.99) = 3.15, rounded 3.
    expect(hundred?.valueError).toBe(3);
  });

  it('is that of the sorted years, in any order, with ties, zeros and negative figures', () => {
    const figure = fc.oneof(
      fc.constantFrom(0, 0, 0, 5, 5, 7, -2),
      fc.double({ min: -100, max: 1e6, noNaN: true }),
      fc.integer({ min: -3, max: 9 }),
    );
    fc.assert(
      fc.property(fc.array(figure, { minLength: 100, maxLength: 700 }), (figures) => {
        const points = exceedance(Float64Array.from(figures), RETURN_PERIODS);
        expect(points.map(({ years }) => years)).toEqual(RETURN_PERIODS);
        for (const { years, value, valueError, tailValue, tailValueError } of points) {
          if (Math.floor(figures.length / years) < 10) {
            expect([value, valueError, tailValue, tailValueError]).toEqual([null, null, null, null]);
            continue;
          }
          const expected = bySorting(figures, years);
          expect((value ?? Number.NaN) + 0).toBe(expected.value + 0);
          const scale = Math.max(...figures.map(Math.abs), 1) * years;
          expect({ years, close: close(tailValue, expected.tailValue, scale) }).toEqual({
            years,
            close: true,
          });
          expect(tailValue).toBeGreaterThanOrEqual(value ?? Infinity);
          expect(valueError).toBeGreaterThanOrEqual(0);
          expect(tailValueError).toBeGreaterThanOrEqual(0);
        }
        const told = points.flatMap(({ value }) => (value === null ? [] : [value]));
        expect([...told].sort((a, b) => a - b)).toEqual(told);
      }),
      { seed: 7, numRuns: 150 },
    );
  });

  it('where years tie at the value still tells the mean of the worst 1/N (own arithmetic)', () => {
    // 30 years of 100 and 970 of 7: the worst tenth is 30 of 100 and 70 of 7.
    const figures = Float64Array.from({ length: 1000 }, (_unused, i) => (i % 100 < 3 ? 100 : 7));
    const [ten, twenty, fifty] = exceedance(figures, [10, 20, 50]);
    expect(ten).toMatchObject({
      value: 7,
      valueError: 0,
      tailValue: expect.closeTo(0.3 * 100 + 0.7 * 7, 10) as number,
    });
    expect(twenty).toMatchObject({ value: 7, tailValue: expect.closeTo(0.6 * 100 + 0.4 * 7, 10) as number });
    expect(fifty).toMatchObject({ value: 100, tailValue: 100, tailValueError: 0 });
  });

  it('of years all alike is that figure, without error', () => {
    for (const point of exceedance(new Float64Array(20_000).fill(3.25), RETURN_PERIODS)) {
      expect(point).toMatchObject({ value: 3.25, valueError: 0, tailValue: 3.25, tailValueError: 0 });
    }
  });

  it.each([
    [1000, [2, 5, 10, 20, 50, 100]],
    [999, [2, 5, 10, 20, 50]],
    [10_000, RETURN_PERIODS],
    [9999, RETURN_PERIODS.slice(0, -1)],
    [19, []],
  ])('of %p years says nothing where fewer than ten lie beyond: told %p', (states, told) => {
    const points = exceedance(
      Float64Array.from({ length: states }, (_unused, i) => i),
      RETURN_PERIODS,
    );
    expect(points.filter(({ value }) => value !== null).map(({ years }) => years)).toEqual(told);
    expect(points.filter(({ tailValue }) => tailValue !== null).map(({ years }) => years)).toEqual(told);
  });

  describe('over repeated samples of 4,000 years', () => {
    const SAMPLES = 400;
    const YEARS = [10, 50, 200] as const;
    const next = uniforms(20_240);
    /** A Pareto law with tail index 3: heavy, with a variance. */
    const samples = Array.from({ length: SAMPLES }, () =>
      exceedance(
        Float64Array.from({ length: 4000 }, () => next() ** (-1 / 3)),
        YEARS,
      ),
    );
    const over = (p: number, of: 'value' | 'valueError' | 'tailValue' | 'tailValueError') => {
      const found = samples.map((points) => points[p]?.[of] ?? Number.NaN);
      const mean = found.reduce((a, b) => a + b, 0) / SAMPLES;
      const variance = found.reduce((a, b) => a + (b - mean) * (b - mean), 0) / (SAMPLES - 1);
      return { mean, deviation: Math.sqrt(variance) };
    };

    it.each(YEARS.map((years, p) => [years, p] as const))(
      'tells the scatter of its figures at 1 in %p',
      (years, p) => {
        // The scatter's own error over 400 samples is 3.5%, more for the heavy tail beyond; rounding of ranks adds to it.
        const value = over(p, 'valueError').mean / over(p, 'value').deviation;
        expect({ years, value, plausible: value > 0.8 && value < 1.25 }).toEqual({
          years,
          value,
          plausible: true,
        });
        const tail = over(p, 'tailValueError').mean / over(p, 'tailValue').deviation;
        expect({ years, tail, plausible: tail > 0.75 && tail < 1.25 }).toEqual({
          years,
          tail,
          plausible: true,
        });
      },
    );

    it.each(YEARS.map((years, p) => [years, p] as const))(
      'finds the law’s own figures at 1 in %p',
      (years, p) => {
        const exact = years ** (1 / 3);
        // Of a Pareto law with tail index 3 the tail value is 3/2 of the value (own algebra).
        expect(Math.abs(over(p, 'value').mean / exact - 1)).toBeLessThan(0.01);
        expect(Math.abs(over(p, 'tailValue').mean / (1.5 * exact) - 1)).toBeLessThan(0.015);
      },
    );
  });
});
