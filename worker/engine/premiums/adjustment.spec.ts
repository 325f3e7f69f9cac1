import { adjustPremium } from './adjustment';

const terms = { minimumPremium: 80, depositPremium: 100, rate: 0.02 };

describe('adjusting a deposit premium', () => {
  it('gives back what the deposit was over, but never below the minimum', () => {
    expect(adjustPremium(terms, 4500, 0)).toMatchObject({
      adjustedPremium: 90,
      premiumDue: -10,
      totalDue: -10,
    });
    expect(adjustPremium(terms, 1000, 0)).toMatchObject({ adjustedPremium: 80, premiumDue: -20 });
  });

  it('gives back reinstatement premium too where the premium falls', () => {
    expect(adjustPremium(terms, 4500, 0.5)).toEqual({
      adjustedPremium: 90,
      premiumDue: -10,
      depositReinstatementPremium: 50,
      finalReinstatementPremium: 45,
      reinstatementDue: -5,
      totalDue: -15,
    });
  });

  it.each([
    [{ ...terms, rate: -0.01 }, 1, 0, 'rate on subject premium is -0.01; it must be 0 or more'],
    [terms, Number.NaN, 0, 'subject premium is NaN'],
    [terms, 1, -1, 'reinstatement share is -1'],
  ])('refuses figures that are not 0 or more', (bad, subject, share, words) =>
    expect(() => adjustPremium(bad, subject, share)).toThrow(words),
  );
});
