import { utilityGainFrom, type Preferences } from './utility';

const TERMS = 12;
const LARGEST_REMAINDER = 1e-16;

/**
 * u(k + change) − u(k) for many states of one γ: where the change is small beside k, by the binomial series
 * k·u′(k)·Σ_j (−1)^j·(γ)_j/(j + 1)!·(change/k)^(j+1), exact to doubles and a fifth of the work; elsewhere by its functions.
 */
export class SmallGain {
  private readonly coefficients = new Float64Array(TERMS);
  /** Largest |change|/k at which the cut series is exact to doubles. */
  private readonly reach: number;

  constructor(private readonly preferences: Preferences) {
    const { riskAversion } = preferences;
    let factor = 1;
    for (let j = 0; j < TERMS; j += 1) {
      this.coefficients[j] = factor / (j + 1);
      factor *= -(riskAversion + j) / (j + 1);
    }
    const next = Math.abs(factor) / (TERMS + 1);
    let reach = 0.1;
    const remainder = (x: number): number => {
      let power = next;
      for (let j = 0; j < TERMS; j += 1) power *= x;
      return power;
    };
    while (remainder(reach) > LARGEST_REMAINDER) reach *= 0.9;
    this.reach = reach;
  }

  /** @param slope u′(k) */
  at(k: number, slope: number, change: number): number {
    const { floor } = this.preferences;
    const x = change / k;
    if (!(k >= floor && k + change >= floor && x <= this.reach && x >= -this.reach)) return utilityGainFrom(k, slope, change, this.preferences);
    const { coefficients } = this;
    let sum = coefficients[TERMS - 1] ?? 0;
    for (let j = TERMS - 2; j >= 0; j -= 1) sum = sum * x + (coefficients[j] ?? 0);
    return slope * change * sum;
  }
}
