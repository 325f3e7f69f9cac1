import * as fc from 'fast-check';
import { amountInWords, amountOf, numberOf, timesShare, unitsOf } from './money';

describe('amounts agreed', () => {
  it.each([
    ['0', 0n],
    ['12500000.5', 125_000_005_000n],
    ['0.0001', 1n],
    ['999999999999999.9999', 9_999_999_999_999_999_999n],
    ['1.50000000', 15_000n],
    ['-3.25', -32_500n],
  ])('%s is kept to the last ten-thousandth', (text, units) => expect(unitsOf(text)).toBe(units));

  it.each(['', '1.', '.5', '1e3', '1,000', 'NaN', '1.00001', ' 1'])('"%s" is no amount', (text) => expect(() => unitsOf(text)).toThrow('is not an amount'));

  it('comes back as the text it was', () => {
    fc.assert(
      fc.property(fc.bigInt({ min: -(10n ** 19n), max: 10n ** 19n }), (units) => {
        expect(unitsOf(amountOf(units))).toBe(units);
      }),
    );
  });

  it('takes a share exactly where floating point would not', () => {
    // 0.07 × 123456789.01 is 8641975.2307: as doubles it is 8641975.230700001.
    expect(amountOf(timesShare(unitsOf('123456789.01'), 0.07))).toBe('8641975.2307');
    expect(amountOf(timesShare(unitsOf('0.0001'), 0.5))).toBe('0.0001');
    expect(timesShare(unitsOf('0.0001'), 0.49)).toBe(0n);
  });

  it('adds a hundred cents to a whole', () => {
    const cents = Array.from({ length: 100 }, () => unitsOf('0.01')).reduce((sum, one) => sum + one, 0n);
    expect(amountOf(cents)).toBe('1');
    expect(numberOf(cents)).toBe(1);
  });

  it('says amounts with their thousands apart', () => {
    expect(amountInWords(unitsOf('1234567.5'))).toBe('1,234,567.5');
    expect(amountInWords(unitsOf('-1234567'))).toBe('-1,234,567');
    expect(amountInWords(unitsOf('999'))).toBe('999');
  });
});
