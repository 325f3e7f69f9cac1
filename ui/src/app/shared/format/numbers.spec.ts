import { exactAmount, figure, percent, shortAmount } from './numbers';

describe('figures as they are read', () => {
  it.each([
    [0, '0'],
    [999, '999'],
    [12_500, '12.5k'],
    [250_000, '250k'],
    [999_950, '1m'],
    [12_500_000, '12.5m'],
    [125_000_000, '125m'],
    [999_999_999, '1bn'],
    [1_250_000_000, '1.25bn'],
    [4_321_000_000_000, '4321bn'],
    [-340_000, '\u2212340k'],
    [-0.0001, '\u22120.0001'],
    [Number.NaN, '–'],
  ])('%d is short for %s', (amount, words) => {
    expect(shortAmount(amount, 'en-GB')).toBe(words);
  });

  it('keeps every digit of decimal text that a double would lose', () => {
    expect(exactAmount('123456789012345.6789', 'en-GB')).toBe('123,456,789,012,345.6789');
    expect(exactAmount(-1234.5, 'en-GB')).toBe('\u22121,234.5');
  });

  it('holds the count of decimals so that columns align', () => {
    expect(percent(0.125, 'en-GB')).toBe('12.50%');
    expect(percent(-0.001, 'en-GB', 1)).toBe('\u22120.1%');
    expect(figure(1234.5, 'en-GB', 2)).toBe('1,234.50');
  });
});
