import fc from 'fast-check';
import { signedLines, type WrittenLine } from './signing';

const line = (written: number, toStand = false): WrittenLine => ({ written, toStand });

describe('signing a slip', () => {
  it('signs a slip that is not over-written as written', () => {
    expect(signedLines([line(0.5), line(0.3)], 1)).toEqual([0.5, 0.3]);
    expect(signedLines([], 1)).toEqual([]);
  });

  it('signs to an order below 100%, and to nothing what lines to stand leave no room for', () => {
    expect(signedLines([line(0.5), line(0.5)], 0.8)).toEqual([0.4, 0.4]);
    expect(signedLines([line(0.8, true), line(0.5)], 0.8)).toEqual([0.8, 0]);
  });

  it('fills an over-written order, never signs above a written line and never touches one to stand', () => {
    const anyLine = fc.record({
      written: fc.double({ min: 0.01, max: 1, noNaN: true }),
      toStand: fc.boolean(),
    });
    fc.assert(
      fc.property(
        fc.array(anyLine, { maxLength: 8 }),
        fc.double({ min: 0.05, max: 1, noNaN: true }),
        (lines, order) => {
          const standing = lines.reduce((sum, { written, toStand }) => sum + (toStand ? written : 0), 0);
          fc.pre(standing <= order);
          const signed = signedLines(lines, order);
          const written = lines.reduce((sum, l) => sum + l.written, 0);
          const total = signed.reduce((sum, s) => sum + s, 0);
          expect(
            Math.abs(total / Math.max(Math.min(order, written), 1e-9) - (lines.length > 0 ? 1 : 0)),
          ).toBeLessThan(1e-12);
          lines.forEach(({ written: asWritten, toStand }, i) => {
            if (toStand) expect(signed[i]).toBe(asWritten);
            else expect(signed[i]).toBeLessThanOrEqual(asWritten);
          });
        },
      ),
    );
  });

  it('refuses lines and orders out of bounds, in words', () => {
    expect(() => signedLines([line(0.2)], 1.2)).toThrow('The order is 1.2; it must be above 0 and 1 at most');
    expect(() => signedLines([line(0.2), line(0)], 1)).toThrow('Written line 2 is 0');
    expect(() => signedLines([line(0.5, true), line(0.25, true)], 0.5)).toThrow(
      'lines to stand is 0.75; it must be the order at most, 0.5',
    );
  });
});
