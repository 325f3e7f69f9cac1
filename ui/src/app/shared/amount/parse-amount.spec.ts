import * as fc from 'fast-check';
import { parseAmount, typedAmount } from './parse-amount';

describe('an amount as it is typed', () => {
  it.each([
    ['12.5m', '12500000'],
    ['0.125bn', '125000000'],
    ['250k', '250000'],
    ['12,500,000', '12500000'],
    ['12 500 000.50', '12500000.5'],
    ['.5M', '500000'],
    ['1 billion', '1000000000'],
    ['007', '7'],
    ['0', '0'],
    ['123456789012345.6789', '123456789012345.6789'],
    ['0.1234567m', '123456.7'],
  ])('%s is %s', (typed, text) => {
    expect(parseAmount(typed)).toEqual({ text });
  });

  it.each([
    ['', /such as/],
    ['.', /such as/],
    ['twelve', /not known|such as/],
    ['-5m', /0 or more/],
    ['12.5x', /“x” is not known/],
    ['12,5', /point for decimals/],
    ['1.23456', /four decimals/],
    ['9999999bn', /larger/],
    ['1e6', /such as|not known/],
    ['NaN', /such as|not known/],
  ])('%s is refused in words', (typed, fault) => {
    expect(parseAmount(typed)).toEqual({ fault: expect.stringMatching(fault) });
  });

  it('reads back what it shows, to the last digit', () => {
    fc.assert(
      fc.property(fc.bigInt({ min: 0n, max: 999_999_999_999_999n }), fc.nat(9999), (whole, places) => {
        const decimals = places === 0 ? '' : `.${String(places).padStart(4, '0').replace(/0+$/, '')}`;
        const text = `${whole}${decimals}`;
        expect(parseAmount(typedAmount(text, 'en-GB'))).toEqual({ text });
      }),
    );
  });
});
