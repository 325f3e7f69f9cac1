import { demand } from '../model/refusal';

const GOLDEN = 0.3819660112501051;
const MOST_STEPS = 200;

/**
 * Least value of a function of one variable on an interval, by golden section and parabolic steps, without derivatives.
 * Source: R. P. Brent, Algorithms for Minimization without Derivatives (1973), chapter 5.
 * @param f continuous; with one minimum inside, it is that one
 * @param tolerance absolute, in the variable; near the square root of the last place nothing finer can be told
 * @throws EngineInputError for an empty interval
 */
export function minimise(f: (x: number) => number, least: number, most: number, tolerance: number): { x: number; value: number; steps: number } {
  demand(least < most, 'The lower end of the interval', least, `below its upper end, ${most}`);
  let [a, b] = [least, most];
  let x = a + GOLDEN * (b - a);
  let [w, v] = [x, x];
  let atX = f(x);
  let [atW, atV] = [atX, atX];
  let [step, before] = [0, 0];
  for (let steps = 1; ; steps += 1) {
    const middle = 0.5 * (a + b);
    if (Math.abs(x - middle) <= 2 * tolerance - 0.5 * (b - a) || steps === MOST_STEPS) return { x, value: atX, steps };
    // The parabola through the three best points, where it falls within and its steps shrink.
    const r = (x - w) * (atX - atV);
    const q0 = (x - v) * (atX - atW);
    const p0 = (x - v) * q0 - (x - w) * r;
    const q = 2 * (q0 - r);
    const p = q > 0 ? -p0 : p0;
    const scale = Math.abs(q);
    const earlier = before;
    before = step;
    if (Math.abs(earlier) > tolerance && Math.abs(p) < Math.abs(0.5 * scale * earlier) && p > scale * (a - x) && p < scale * (b - x)) {
      step = p / scale;
      const at = x + step;
      if (at - a < 2 * tolerance || b - at < 2 * tolerance) step = x < middle ? tolerance : -tolerance;
    } else {
      before = x < middle ? b - x : a - x;
      step = GOLDEN * before;
    }
    const next = x + (Math.abs(step) >= tolerance ? step : step > 0 ? tolerance : -tolerance);
    const atNext = f(next);
    if (atNext <= atX) {
      if (next < x) b = x;
      else a = x;
      [v, atV, w, atW, x, atX] = [w, atW, x, atX, next, atNext];
    } else {
      if (next < x) a = next;
      else b = next;
      if (atNext <= atW || w === x) [v, atV, w, atW] = [w, atW, next, atNext];
      else if (atNext <= atV || v === x || v === w) [v, atV] = [next, atNext];
    }
  }
}
