import { purePremium } from './pure';

const terms = (reinstatements: number[]) => ({ limit: 10, annualDeductible: 0, reinstatements });

describe('a pure premium', () => {
  it('without reinstatements is the expected payoff', () => {
    expect(purePremium([0.8, 0.1, 0.1], [0, 5, 30], terms([]))).toBeCloseTo(1.5, 14);
  });

  it('counts the reinstatement premiums that it brings', () => {
    // E[Z] = .1·5 + .1·20, E[ρ] = .1·½ + .1·1.
    expect(purePremium([0.8, 0.1, 0.1], [0, 5, 30], terms([1]))).toBeCloseTo(2.5 / 1.15, 14);
    expect(purePremium([0.8, 0.1, 0.1], [0, 5, 30], terms([0]))).toBeCloseTo(2.5, 14);
  });

  it('refuses what is no law, in words', () => {
    expect(() => purePremium([1], [0, 1], terms([]))).toThrow(
      'yearly sums is 2; it must be that of probabilities, 1',
    );
    expect(() => purePremium([0.5, 0.4], [0, 1], terms([]))).toThrow('probabilities is 0.9; it must be 1');
    expect(() => purePremium([1.5, -0.5], [0, 1], terms([]))).toThrow('Probability 2 is -0.5');
  });
});
