import { EngineInputError } from '../model/refusal';

const LOWEST_RATE = -0.5;
const HIGHEST_RATE = 1;
const MOST_STEPS = 100;

/**
 * Root of `excess` between −50% and 100%, by false position with the Illinois halving (M. Dowell, P. Jarratt, BIT 11,
 * 1971): the rate moves capital too, with a slope of γ, so that plain repetition would run away.
 * @throws EngineInputError where there is none
 */
export function impliedRate(excess: (rate: number) => number): number {
  let [a, b] = [LOWEST_RATE, HIGHEST_RATE];
  let [atA, atB] = [excess(a), excess(b)];
  // Alike at both ends, nothing tells one rate from another: logarithmic utility of an idle house.
  if (!(atA * atB <= 0) || atA === atB) throw new EngineInputError('The stated discount factor implies no sensible riskless rate on this book.');
  let rate = a;
  for (let step = 0; step < MOST_STEPS; step += 1) {
    const next = b - (atB * (b - a)) / (atB - atA);
    const atNext = excess(next);
    const moved = Math.abs(next - rate);
    rate = next;
    if (atNext === 0 || moved < 1e-14) break;
    if (atNext * atB < 0) [a, atA] = [b, atB];
    else atA /= 2;
    [b, atB] = [next, atNext];
  }
  return rate;
}
