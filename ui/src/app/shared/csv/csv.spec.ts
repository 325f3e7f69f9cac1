import { csvOf, tabbedOf } from './csv';

describe('rows that leave the desk', () => {
  it('quotes what needs it and keeps figures plain', () => {
    expect(
      csvOf([
        ['layer', 'limit'],
        ['first, "working"', 12500000.5],
        [null, -3],
      ]),
    ).toBe('layer,limit\r\n"first, ""working""",12500000.5\r\n,-3\r\n');
  });

  it('lets no text become a formula', () => {
    expect(csvOf([['=1+1', '+2', '-3', '@x']])).toBe("'=1+1,'+2,'-3,'@x\r\n");
    expect(tabbedOf([['=1+1', 2]])).toBe("'=1+1\t2");
  });

  it('keeps a row on its line in the clipboard', () => {
    expect(tabbedOf([['a\tb\nc', 1]])).toBe('a b c\t1');
  });
});
