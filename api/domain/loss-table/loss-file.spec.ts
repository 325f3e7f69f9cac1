import fc from 'fast-check';
import { lossAt, severityOf } from '../../../worker/engine/losses/severity';
import { LossFile } from './loss-file';

const HEADER = ['event', 'mean_loss', 'sd', 'common_share', 'exposed_value'];

function read(...rows: string[][]) {
  const file = new LossFile((event) => event.startsWith('E'), 'Isles, version 1');
  file.header(HEADER);
  rows.forEach((row, index) => file.row(index + 2, row));
  return { rows: file.end(), problems: file.problems.report('losses.csv', rows.length).problems };
}

/** Amounts, deviations and bounds over many orders of magnitude, near the edges of what a law has too. */
const amount = fc.double({ min: 0.01, max: 1e15, noNaN: true });
const variation = fc.oneof(fc.double({ min: -4, max: 2, noNaN: true }).map((power) => 10 ** power), fc.constant(0));
const widest = fc.double({ min: 0.9, max: 1.1, noNaN: true });

describe('LossFile', () => {
  it('takes only rows that the engine can draw losses from', () => {
    let taken = 0;
    fc.assert(
      fc.property(amount, variation, fc.option(fc.double({ min: 1, max: 1e6, noNaN: true })), fc.option(widest), (mean, cv, multiple, edge) => {
        const exposed = multiple === null ? null : mean * multiple;
        const sd = edge !== null && exposed !== null ? edge * Math.sqrt(mean * (exposed - mean)) : cv * mean;
        const { rows } = read(['E1', String(mean), String(sd), '0.5', exposed === null ? '' : String(exposed)]);
        if (rows[0] === undefined) return;
        taken += 1;
        const severity = severityOf(rows[0].meanLoss, rows[0].sd, rows[0].exposedValue ?? NaN);
        let before = 0;
        for (const score of [-8, -4, -1, 0, 1, 4, 8]) {
          const loss = lossAt(severity, score);
          expect(loss).toBeGreaterThanOrEqual(before);
          expect(loss).toBeLessThanOrEqual(exposed ?? Infinity);
          expect(Number.isFinite(loss)).toBe(true);
          before = loss;
        }
      }),
      { numRuns: 3000, seed: 7 },
    );
    expect(taken).toBeGreaterThan(1000);
  });

  it.each([
    ['a deviation where the mean is 0', ['E1', '0', '1', '0', ''], 'sd'],
    ['a mean above the exposed value', ['E1', '2', '0', '0', '1'], 'mean_loss'],
    ['the widest deviation that a damage ratio could have', ['E1', '100', '100', '0', '200'], 'sd'],
    ['a deviation so small that 0 is meant', ['E1', '1000', '0.001', '0', ''], 'sd'],
    ['a tiny part of the smallest coin', ['E1', '1e-300', '0', '0', ''], 'mean_loss'],
    ['a lognormal of more than a hundred times its mean', ['E1', '1', '101', '0', ''], 'sd'],
  ])('refuses %s', (_what, row, column) => expect(read(row).problems).toEqual([expect.objectContaining({ line: 2, column })]));

  it('takes certain losses, a total loss and events without a loss', () => {
    const { rows, problems } = read(['E1', '5', '0', '0', ''], ['E2', '5', '0', '1', '5'], ['E3', '0', '0', '0', '10']);
    expect(problems).toEqual([]);
    expect(rows.map(({ meanLoss, exposedValue }) => [meanLoss, exposedValue])).toEqual([[5, null], [5, 5], [0, 10]]);
  });
});
