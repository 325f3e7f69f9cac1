import { SmallGain } from './small-gain';
import { marginalUtility, utilityGain } from './utility';

describe('gains of utility by series', () => {
  it.each([0, 0.5, 1, 2, 6, 15, 30])('are those of its functions to doubles: γ = %p', (riskAversion) => {
    const preferences = { riskAversion, floor: 0.25 };
    const series = new SmallGain(preferences);
    for (const k of [-0.5, 0.24, 0.2501, 0.3, 0.9, 1.06, 4]) {
      for (const change of [0, 1e-14, -1e-9, 1e-5, -3e-3, 0.011, -0.02, 0.05, -0.2, 0.9, -2]) {
        const expected = utilityGain(k, change, preferences);
        const found = series.at(k, marginalUtility(k, preferences), change);
        const fine = found === expected || Math.abs(found / expected - 1) < 4e-15 * (1 + riskAversion);
        expect({ k, change, found, expected, fine }).toEqual({ k, change, found, expected, fine: true });
      }
    }
  });
});
