import fc from 'fast-check';
import { periodsByChoice, periodsFromFirstLoss, type DatedLoss } from './hours-clause';

const at = (hour: number, amount: number): DatedLoss => ({ minute: 60 * hour, amount });
const losses = fc.array(
  fc.record({ minute: fc.integer({ min: 0, max: 20_000 }), amount: fc.integer({ min: 0, max: 100 }) }),
  { maxLength: 12 },
);
const excess = (amount: number): number => Math.min(Math.max(amount - 60, 0), 80);

describe('an hours clause', () => {
  it('takes losses in order of time, however they were noted', () => {
    expect(periodsFromFirstLoss([at(80, 4), at(0, 1), at(71, 2)], 72)).toEqual([
      { start: 0, amount: 3 },
      { start: 4800, amount: 4 },
    ]);
  });

  it('leaves a loss at the very end of the hours to the next period', () => {
    expect(periodsFromFirstLoss([at(0, 1), at(72, 2)], 72).map(({ amount }) => amount)).toEqual([1, 2]);
    expect(periodsByChoice([at(0, 1), at(72, 2)], 72, excess).map(({ amount }) => amount)).toEqual([1, 2]);
  });

  it('has no periods without losses', () => {
    expect(periodsFromFirstLoss([], 72)).toEqual([]);
    expect(periodsByChoice([], 72, excess)).toEqual([]);
  });

  it('of equal choices takes the one that commences soonest', () => {
    expect(periodsByChoice([at(0, 1), at(50, 1), at(100, 1)], 72, () => 0)).toEqual([
      { start: 0, amount: 2 },
      { start: 6000, amount: 1 },
    ]);
  });

  it('counts every loss once from the first loss, and lets none of the cedant’s periods overlap', () => {
    fc.assert(
      fc.property(losses, (drawn) => {
        const total = drawn.reduce((sum, { amount }) => sum + amount, 0);
        const first = periodsFromFirstLoss(drawn, 72);
        expect(first.reduce((sum, { amount }) => sum + amount, 0)).toBe(total);
        for (const periods of [first, periodsByChoice(drawn, 72, excess)]) {
          for (let i = 1; i < periods.length; i += 1) {
            expect(periods[i]!.start - periods[i - 1]!.start).toBeGreaterThanOrEqual(72 * 60);
          }
        }
      }),
    );
  });

  it('finds the choice worth most, as trying every set of starts does', () => {
    const bestOf = (ordered: readonly DatedLoss[]): number => {
      const [first, ...rest] = ordered;
      if (first === undefined) return 0;
      const within = ordered.filter(({ minute }) => minute < first.minute + 72 * 60);
      const amount = within.reduce((sum, loss) => sum + loss.amount, 0);
      return Math.max(bestOf(rest), excess(amount) + bestOf(ordered.slice(within.length)));
    };
    fc.assert(
      fc.property(losses, (drawn) => {
        const ordered = [...drawn].sort((a, b) => a.minute - b.minute);
        const chosen = periodsByChoice(drawn, 72, excess);
        expect(chosen.reduce((sum, { amount }) => sum + excess(amount), 0)).toBe(bestOf(ordered));
      }),
    );
  });

  it('refuses what is no loss or no clause, in words', () => {
    expect(() => periodsFromFirstLoss([at(0, 1)], 0)).toThrow('hours clause is 0; it must be above 0');
    expect(() => periodsFromFirstLoss([at(0, 1), at(1, -2)], 72)).toThrow(
      'amount of loss 2 is -2; it must be 0 or more',
    );
    expect(() => periodsByChoice([at(Number.NaN, 1)], 72, excess)).toThrow('minute of loss 1 is NaN');
  });
});
