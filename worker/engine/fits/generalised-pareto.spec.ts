import { EngineInputError } from '../model/refusal';
import { fitGeneralisedPareto, meanLayerLoss, type GeneralisedPareto } from './generalised-pareto';

const law = (shape: number, scale = 3, threshold = 10): GeneralisedPareto => ({ threshold, shape, scale });
const survival = ({ threshold, shape, scale }: GeneralisedPareto, x: number): number => {
  const y = (x - threshold) / scale;
  return shape === 0 ? Math.exp(-y) : Math.max(1 + shape * y, 0) ** (-1 / shape);
};
/** A sample as even as can be: the quantiles at the middles of n equal steps. */
const evenSample = (shape: number, n: number): number[] =>
  Array.from({ length: n }, (_unused, i) => {
    const above = (i + 0.5) / n;
    return 10 + 3 * (shape === 0 ? -Math.log(above) : (above ** -shape - 1) / shape);
  });
const logLikelihood = (losses: readonly number[], shape: number, scale: number): number =>
  losses.reduce(
    (sum, x) => sum - Math.log(scale) - (1 + 1 / shape) * Math.log1p((shape * (x - 10)) / scale),
    0,
  );

describe('fitting a generalised Pareto law', () => {
  it.each([-0.3, -0.1, 0, 0.2, 0.5, 0.9, 1.4])('finds the law of an even sample: shape %p', (shape) => {
    const fit = fitGeneralisedPareto(evenSample(shape, 20_000), 10);
    expect({ shape, off: Math.abs(fit.shape - shape) < 0.005, fit }).toMatchObject({ off: true });
    expect(Math.abs(fit.scale / 3 - 1)).toBeLessThan(0.005);
    expect(fit.exceedances).toBe(20_000);
  });

  it('is the best of the likelihood, which no step away betters', () => {
    const losses = evenSample(0.4, 60).map((x, i) => x * (1 + 0.05 * (i % 3)));
    const { shape, scale, logLikelihood: most } = fitGeneralisedPareto(losses, 10);
    expect(Math.abs(logLikelihood(losses, shape, scale) / most - 1)).toBeLessThan(1e-12);
    for (const [up, out] of [
      [1, 0],
      [-1, 0],
      [0, 1],
      [0, -1],
      [1, 1],
      [1, -1],
      [-1, 1],
      [-1, -1],
    ] as const) {
      const away = logLikelihood(losses, shape * (1 + 1e-4 * up), scale * (1 + 1e-4 * out));
      expect({ up, out, better: away > most }).toEqual({ up, out, better: false });
    }
  });

  it('turns a change of currency into one of scale alone, and leaves out what is at or below the threshold', () => {
    const losses = evenSample(0.6, 200);
    const fit = fitGeneralisedPareto(losses, 10);
    const other = fitGeneralisedPareto(
      [...losses, 10, 9, -5].map((x) => 1e6 * x),
      1e7,
    );
    expect(Math.abs(other.shape / fit.shape - 1)).toBeLessThan(1e-6);
    expect(Math.abs(other.scale / fit.scale / 1e6 - 1)).toBeLessThan(1e-6);
    expect(other.exceedances).toBe(200);
  });

  it.each([
    ['too few losses', evenSample(0.5, 9), 'above the threshold of 10 is 9; it must be 10 or more'],
    ['an infinite loss', [...evenSample(0.5, 20), Infinity], 'largest loss is Infinity'],
    [
      'losses that end all at once',
      Array.from({ length: 50 }, (_unused, i) => 11 + 0.001 * i),
      'The best shape of the tail above 10 is',
    ],
    ['a tail too heavy for any insurer', evenSample(4, 200), 'The best shape of the tail above 10 is'],
  ])('refuses %s', (_what, losses, words) => {
    expect(() => fitGeneralisedPareto(losses, 10)).toThrow(EngineInputError);
    expect(() => fitGeneralisedPareto(losses, 10)).toThrow(words);
  });
});

describe('the mean loss to a layer above the threshold', () => {
  it.each([-0.4, -1e-9, 0, 1e-9, 0.5, 1 - 1e-9, 1, 1 + 1e-9, 1.5])(
    'is the area under the survival curve: shape %p',
    (shape) => {
      for (const [limit, attachment] of [
        [5, 10],
        [150, 12],
      ] as const) {
        // Simpson's rule on steps that grow with the square, fine where the curve is steep.
        const n = 20_000;
        const at = (i: number): number => {
          const t = i / n;
          return survival(law(shape), attachment + limit * t * t) * 2 * limit * t;
        };
        let area = at(0) + at(n);
        for (let i = 1; i < n; i += 1) area += at(i) * (i % 2 === 1 ? 4 : 2);
        const expected = area / (3 * n);
        const found = meanLayerLoss(law(shape), limit, attachment);
        const off = Math.abs(found / expected - 1);
        expect({ shape, limit, attachment, found, expected, off: off < 1e-6 }).toMatchObject({ off: true });
      }
    },
  );

  it('unlimited from the threshold is scale ÷ (1 − shape)', () => {
    expect(meanLayerLoss(law(0.25), Infinity, 10)).toBeCloseTo(4, 12);
    expect(meanLayerLoss(law(-0.25), Infinity, 10)).toBeCloseTo(2.4, 12);
  });

  it('is nothing above the end of a tail that ends', () => {
    expect(meanLayerLoss(law(-0.5), 5, 16)).toBe(0);
    expect(meanLayerLoss(law(-0.5), 5, 17)).toBe(0);
  });

  it.each([
    [law(0.5, 0), 5, 10, 'The scale is 0'],
    [law(0.5), 5, 9, 'attachment is 9; it must be the threshold of the fit, 10, or above'],
    [law(0.5), 0, 10, 'The limit is 0'],
    [law(1), Infinity, 10, 'unlimited layer is 1; it must be below 1'],
  ])('refuses what has no such mean: %p, %p xs %p', (bad, limit, attachment, words) =>
    expect(() => meanLayerLoss(bad, limit, attachment)).toThrow(words),
  );
});
