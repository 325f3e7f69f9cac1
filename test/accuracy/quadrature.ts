import { CompensatedSum } from './compensated-sum';

const { cos, PI } = Math;

const POINTS = 16;

/** Zeros and weights of the Legendre polynomial (M. Abramowitz, I. A. Stegun, 25.4.29), by Newton's method. */
const RULE = Array.from({ length: POINTS }, (_unused, i) => {
  let x = cos((PI * (i + 0.75)) / (POINTS + 0.5));
  let slope = 0;
  for (let step = 0; step < 20; step += 1) {
    let [before, now] = [1, x];
    for (let n = 2; n <= POINTS; n += 1)
      [before, now] = [now, ((2 * n - 1) * x * now - (n - 1) * before) / n];
    slope = (POINTS * (x * now - before)) / (x * x - 1);
    x -= now / slope;
  }
  return { x, weight: 2 / ((1 - x * x) * slope * slope) };
});

/**
 * Gauss-Legendre quadrature in panels from `from` to `to`, each as wide as `width` says at both its ends; of several
 * integrands at the same points.
 * @returns one integral an entry that `integrands` answers
 */
export function integrals(
  integrands: (x: number) => readonly number[],
  from: number,
  to: number,
  width: (x: number) => number,
): number[] {
  const sums: CompensatedSum[] = integrands(from).map(() => new CompensatedSum());
  let left = from;
  while (left < to) {
    let step = width(left);
    for (let halvings = 0; halvings < 60 && step > width(left + step); halvings += 1) step /= 2;
    const right = left + step < to ? left + step : to;
    const half = (right - left) / 2;
    for (const { x, weight } of RULE) {
      const values = integrands(left + half * (1 + x));
      sums.forEach((sum, k) => sum.add(weight * half * (values[k] ?? 0)));
    }
    left = right;
  }
  return sums.map((sum) => sum.value);
}
